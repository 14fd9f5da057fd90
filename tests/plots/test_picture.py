"""The picture: what stands in the SVG, where the curves run in it, and that it is the same at every call."""

from __future__ import annotations

import re
from xml.etree import ElementTree

import pytest

from symcirc.plots import ticks
from symcirc.plots.curves import WHAT
from symcirc.plots.picture import picture, svg_of
from tests.plots.sheets import LOW_PASS, REAL_BAND_PASS, curves, example

SVG = "{http://www.w3.org/2000/svg}"
TARGET, REAL = "#56b4e9", "#d55e00"


@pytest.fixture(scope="module")
def masked():
    return example("hive_mask")


def parsed(text):
    return ElementTree.fromstring(text)


def excluded(svg):
    return [g for g in svg.iter(f"{SVG}g") if re.search(r"_excluded_\d+$", g.get("id", ""))]


def test_every_limit_is_a_hatched_area_where_its_edges_lie(masked):
    svg = parsed(svg_of(masked, ["magnitude"]))
    areas = excluded(svg)
    assert len(areas) == 2
    assert all("url(#" in ElementTree.tostring(area, encoding="unicode") for area in areas)
    boxes = [_box(area) for area in areas]
    # the axis goes from 100 Hz to 100 kHz: a third of its width is a decade
    width = boxes[1][1] - boxes[0][0]
    assert (boxes[0][1] - boxes[0][0]) / width == pytest.approx(0.392, abs=0.002)  # log10(15)/3
    assert (boxes[1][0] - boxes[0][0]) / width == pytest.approx(0.651, abs=0.002)  # log10(90)/3


def _box(area):
    text = ElementTree.tostring(area, encoding="unicode")
    # the shape is drawn by reference, or as a path of its own
    numbers = [tuple(map(float, pair)) for pair in re.findall(r"[ML] ?(-?[\d.]+) (-?[\d.]+)", text)]
    xs = [x for x, _ in numbers]
    return min(xs), max(xs)


def test_the_pass_band_shows_the_limit_that_is_set_to_it(masked):
    assert len(excluded(parsed(svg_of(masked, ["passband"])))) == 1
    assert not excluded(parsed(svg_of(masked, ["phase", "delay", "step", "poles"])))


def test_target_stage_and_real_amplifier_differ_in_width_and_dashes_not_by_colour_alone():
    svg = svg_of(curves(REAL_BAND_PASS), ["magnitude"])
    styles = set(re.findall(r'style="(fill: none; stroke[^"]*)"', svg))
    (target,) = [s for s in styles if TARGET in s and "width: 4.5" in s]
    (real,) = [s for s in styles if REAL in s and "width: 1.7" in s]
    (stage,) = [s for s in styles if "#000000" in s and "width: 1.3" in s]
    assert "dasharray" in real
    assert "dasharray" not in target + stage


def test_an_svg_is_the_same_text_at_every_call_without_date_or_program(masked):
    first, second = (svg_of(masked, WHAT) for _ in range(2))
    assert first == second
    assert first.startswith("<svg")
    for word in ("<dc:date", "metadata", "atplotlib v", "http://matplotlib"):
        assert word not in first


@pytest.mark.parametrize("kind", ["png", "pdf"])
def test_png_and_pdf_are_the_same_bytes_at_every_call(masked, kind):
    first, second = (picture(masked, ["magnitude", "poles"], kind) for _ in range(2))
    assert first == second


def test_letters_are_outlines_and_nothing_is_fetched(masked):
    svg = svg_of(masked, WHAT)
    assert "<text" not in svg
    assert "font-family" not in svg
    assert not re.findall(r'href="(?!#)', svg)


def test_ids_are_single_and_two_pictures_share_none(masked):
    texts = [svg_of(masked, ["magnitude"]), svg_of(example("hive_rumble"), ["magnitude"])]
    ids = [re.findall(r'\bid="([^"]+)"', text) for text in texts]
    assert all(len(own) == len(set(own)) for own in ids)
    assert not set(ids[0]) & set(ids[1])
    for text, own in zip(texts, ids, strict=True):
        assert set(re.findall(r'(?:url\(#|href="#)([^")]+)', text)) <= set(own)


def test_title_and_description_say_what_is_shown(masked):
    svg = parsed(svg_of(masked, ["magnitude", "phase"]))
    title, description = svg.find(f"{SVG}title"), svg.find(f"{SVG}desc")
    assert title.text == "Hive microphone, anti-alias mask"
    assert "magnitude, phase, from 100 Hz to 100 kHz" in description.text
    assert "loss <= 1 dB below 1.5 kHz" in description.text
    assert svg.get("aria-labelledby") == f"{title.get('id')} {description.get('id')}"


def test_a_title_with_signs_of_other_languages_and_of_markup_is_kept():
    title = "A $very_{odd}^ <b>&amp; 低通 title " + "long " * 40
    svg = svg_of(curves(f'stage "{title}"\n{LOW_PASS}'), ["magnitude"])
    assert parsed(svg).find(f"{SVG}title").text == title


@pytest.mark.parametrize("what", WHAT)
def test_every_panel_draws_every_curve(what):
    svg = svg_of(curves(REAL_BAND_PASS), [what])
    assert all(colour in svg for colour in (TARGET, REAL))


def test_all_marks_are_within_their_axis_and_no_more_than_eight():
    for low, high in ((0.0, 1.2), (-3.0, 0.5), (-1e-3, 7e5), (98.0, 101.0), (-0.2, -0.1)):
        marks = ticks.even_marks(low, high)
        assert 2 <= len(marks) <= 9
        assert low <= marks[0] < marks[-1] <= high


@pytest.mark.parametrize(
    ("low", "high", "labels"),
    [
        (100.0, 20e3, ["100 Hz", "1 kHz", "10 kHz"]),
        (5.0, 500.0, ["5 Hz", "10 Hz", "20 Hz", "50 Hz", "100 Hz", "200 Hz", "500 Hz"]),
        (10.2e3, 12.4e3, ["10.5 kHz", "11 kHz", "11.5 kHz", "12 kHz"]),
        (1e-3, 1e8, ["10 mHz", "1 Hz", "100 Hz", "10 kHz", "1 MHz", "100 MHz"]),
    ],
)
def test_frequencies_are_labelled_in_engineering_units(low, high, labels):
    assert [ticks.frequency_label(f) for f in ticks.frequency_marks(low, high)[0]] == labels

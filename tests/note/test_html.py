"""The note as HTML, read back by html5lib, a parser made from the WHATWG's HTML standard."""

from __future__ import annotations

import re
import xml.etree.ElementTree as ElementTree
from dataclasses import replace
from functools import cache
from importlib.resources import files

import html5lib
import pytest
from hypothesis import given
from hypothesis import strategies as st

from symcirc.note.html import html
from symcirc.note.html_figure import inline_svg, keeps_colours
from symcirc.note.html_text import plain
from symcirc.note.mathml import equation_mathml, mathml
from symcirc.note.model import (
    Derivation,
    Equation,
    Figure,
    Heading,
    Listing,
    Mathematics,
    Paragraph,
    Pieces,
    Reference,
    Table,
)
from symcirc.transfer.form import (
    Decimal,
    Divided,
    Form,
    Integer,
    Negative,
    Power,
    Product,
    Root,
    Sum,
    Symbol,
)
from symcirc.transfer.latex import latex
from tests.note.sample import NAMES, ODD_TEXTS, SAMPLE, WIDE

HTML, MATHML, SVG = (
    "{http://www.w3.org/1999/xhtml}",
    "{http://www.w3.org/1998/Math/MathML}",
    "{http://www.w3.org/2000/svg}",
)

# W3C, "MathML Core", from memory: its elements, the attributes of all of them, and those of some.
CORE = {
    *(
        "annotation",
        "annotation-xml",
        "maction",
        "math",
        "merror",
        "mfrac",
        "mi",
        "mmultiscripts",
        "mn",
        "mo",
        "mover",
    ),
    *(
        "mpadded",
        "mphantom",
        "mprescripts",
        "mroot",
        "mrow",
        "ms",
        "mspace",
        "msqrt",
        "mstyle",
        "msub",
        "msubsup",
    ),
    *("msup", "mtable", "mtd", "mtext", "mtr", "munder", "munderover", "semantics"),
}
GLOBAL = {
    "class",
    "id",
    "style",
    "dir",
    "displaystyle",
    "mathbackground",
    "mathcolor",
    "mathsize",
    "scriptlevel",
}
OWN = {
    "math": {"display"},
    "mi": {"mathvariant"},
    "mo": {
        "form",
        "fence",
        "separator",
        "lspace",
        "rspace",
        "stretchy",
        "symmetric",
        "maxsize",
        "minsize",
        "largeop",
    },
    "mfrac": {"linethickness"},
    "mtd": {"columnspan", "rowspan"},
}
#: How many children these have.
COUNTS = {"mfrac": 2, "msub": 2, "msup": 2, "msubsup": 3}


@cache
def page() -> ElementTree.Element:
    return parsed(html(SAMPLE))


def parsed(text: str) -> ElementTree.Element:
    """Parse a page; anything that the HTML standard calls a parse error raises."""
    return html5lib.HTMLParser(strict=True).parse(text)


def text_of(element: ElementTree.Element) -> str:
    return "".join(element.itertext())


def texts(tag: str) -> list[str]:
    return [text_of(element) for element in page().iter(HTML + tag)]


def equations() -> list[Equation]:
    found = [block for block in SAMPLE.blocks if isinstance(block, Equation)]
    return found + [
        step.equation for block in SAMPLE.blocks if isinstance(block, Derivation) for step in block.steps
    ]


def without_mathematics(words: Pieces) -> list[str]:
    return [piece for piece in words if isinstance(piece, str)]


def test_page_parses_without_a_parse_error() -> None:
    assert page().tag == f"{HTML}html"
    assert page().get("lang") == "en"


@pytest.mark.parametrize("name", ODD_TEXTS)
def test_odd_text_in_a_paragraph_is_read_as_it_stands(name: str) -> None:
    assert f"{name}: {ODD_TEXTS[name]}" in texts("p")


def test_odd_text_anywhere_else_is_read_as_it_stands() -> None:
    assert texts("title") == texts("h1") == [SAMPLE.title]
    assert SAMPLE.file in texts("dd")
    assert SAMPLE.digest in texts("dd")
    headings = [block.text for block in SAMPLE.blocks if isinstance(block, Heading)]
    assert texts("h2") + texts("h3") == sorted(headings, key=lambda text: text == "A part of a section")
    figures = [block for block in SAMPLE.blocks if isinstance(block, Figure)]
    assert texts("figcaption") == [f"Figure {one.number}. {one.caption}" for one in figures]
    assert [svg.get("aria-label") for svg in page().iter(f"{SVG}svg")] == [one.alternative for one in figures]
    tables = [block for block in SAMPLE.blocks if isinstance(block, Table)]
    assert texts("caption") == [f"Table {one.number}. {one.caption}" for one in tables]
    cells = texts("td") + texts("th")
    for table in tables:
        for words in (*table.header, *(cell for row in table.rows for cell in row)):
            assert any(all(said in cell for said in without_mathematics(words)) for cell in cells)
    listing = next(block.text for block in SAMPLE.blocks if isinstance(block, Listing))
    assert texts("pre") == [listing]


def test_text_makes_no_element_and_no_attribute_that_runs_or_fetches() -> None:
    written = "html head meta title style body a header h1 h2 h3 dl div dt dd time nav ol li main p ul span pre code"
    written += " details summary label input strong b table caption thead tbody tr th td figure figcaption"
    for element in page().iter():
        if element.tag.startswith(HTML):
            assert element.tag.removeprefix(HTML) in written.split()
        assert not [name for name in element.attrib if name.startswith("on") or name.endswith("src")]
        assert element.get("href", "#").startswith("#")
    assert not re.search(r"url\(|@import", text_of(next(page().iter(f"{HTML}style"))))


def test_every_reference_leads_to_one_place() -> None:
    ids = [element.get("id") for element in page().iter() if element.get("id")]
    assert len(ids) == len(set(ids))
    links = {element.get("href", "")[1:] for element in page().iter(f"{HTML}a")}
    assert links <= set(ids)
    assert {"eq-1", "eq-7", "tab-1", "fig-2", "note"} <= links
    assert {block.anchor for block in SAMPLE.blocks if isinstance(block, Equation | Table | Figure)} <= set(
        ids
    )
    assert {equation.anchor for equation in equations()} <= set(ids)
    for element in page().iter():
        for inside in re.findall(r"url\(#([^)]*)\)", " ".join(element.attrib.values())):
            assert inside in ids


def test_reference_to_what_is_not_there_is_refused() -> None:
    with pytest.raises(KeyError, match="eq-none"):
        html(replace(SAMPLE, blocks=(Paragraph((Reference("eq-none"),)),)))


def test_contents_list_the_sections_in_order() -> None:
    nav = next(page().iter(f"{HTML}nav"))
    sections = [block.text for block in SAMPLE.blocks if isinstance(block, Heading) and block.level == 1]
    assert [text_of(link) for link in nav.iter(f"{HTML}a")] == sections


def test_note_of_one_section_has_no_contents() -> None:
    assert "<nav" not in html(replace(SAMPLE, blocks=(Heading(1, "Summary"), Paragraph(("Text.",)))))


def test_control_characters_are_shown_and_lone_halves_of_characters_written() -> None:
    text = html(replace(SAMPLE, blocks=(Paragraph(("a\0b\x1bc\x7fd\x9ee\ud800f\uffff\U0001fffe\r\ng",)),)))
    assert [text_of(p) for p in parsed(text).iter(f"{HTML}p")] == ["a␀b␛c␡d\ufffde\ufffdf\ufffd\ufffd\ng"]
    assert text.encode()


@given(st.text(st.characters(codec="utf-8"), max_size=30))
def test_any_text_without_control_characters_is_read_as_it_stands(text: str) -> None:
    kept = plain(text).replace("\r", "")
    read = html5lib.HTMLParser(strict=True).parseFragment(f"<p>{kept}</p>")
    shown = text.replace("\r\n", "\n")
    assert len(text_of(read)) == len(shown)
    assert all(
        b in (a, "\ufffd") or 0x2400 <= ord(b) < 0x2422 for a, b in zip(shown, text_of(read), strict=True)
    )


def test_every_table_has_a_caption_and_heads_with_a_scope() -> None:
    for table in page().iter(f"{HTML}table"):
        assert len(list(table.iter(f"{HTML}caption"))) == 1
        heads = list(table.iter(f"{HTML}th"))
        assert {head.get("scope") for head in heads} == {"col", "row"}
        assert all(text_of(head) for head in heads)


def test_empty_head_is_a_plain_cell() -> None:
    table = Table("tab-9", 9, "T", ((), ("A",)), (((), ("1",)),), (False, True))
    read = parsed(html(replace(SAMPLE, blocks=(table,))))
    assert [text_of(head) for head in read.iter(f"{HTML}th")] == ["A"]
    assert len(list(read.iter(f"{HTML}td"))) == 3


def test_scrolling_boxes_can_be_reached_with_the_keyboard_and_have_names() -> None:
    boxes = [element for element in page().iter(f"{HTML}div") if "wide" in element.get("class", "").split()]
    assert len(boxes) == len(equations()) + 4
    for box in boxes:
        assert (box.get("tabindex"), box.get("role")) == ("0", "group")
    assert len({box.get("aria-label") for box in boxes}) == len(boxes)


def test_derivation_folds_every_equation() -> None:
    derivation = next(block for block in SAMPLE.blocks if isinstance(block, Derivation))
    folds = list(page().iter(f"{HTML}details"))
    assert len(folds) == len(derivation.steps)
    for fold, step in zip(folds, derivation.steps, strict=True):
        assert step.equation.anchor in [element.get("id") for element in fold.iter()]
        assert fold.get("open") is None


def test_mathml_is_of_the_core_vocabulary() -> None:
    elements = [element for element in page().iter() if element.tag.startswith(MATHML)]
    assert len(elements) > 500
    for element in elements:
        name = element.tag.removeprefix(MATHML)
        assert name in CORE
        assert set(element.attrib) <= GLOBAL | OWN.get(name, set()) | {"aria-label"}
        if name in COUNTS:
            assert len(element) == COUNTS[name]


def signs_of_mathml(written: str) -> str:
    """Return a formula's letters, digits and signs in order, but for the signs of multiplication."""
    return re.sub(r"[\u2062⋅×]", "", text_of(ElementTree.fromstring(written)))


def signs_of_latex(written: str) -> str:
    for command, letter in ((r"\_", "\0"), (r"\pi", "π"), (r"\omega", "ω"), ("-", "−")):
        written = written.replace(command, letter)
    return re.sub(r"\\[a-zA-Z]+|[{} _^]|\\,", "", written).replace("\0", "_")


@pytest.mark.parametrize("equation", equations(), ids=lambda equation: equation.anchor)
def test_equation_reads_as_its_formula_in_latex(equation: Equation) -> None:
    relation = {">=": "≥", "<=": "≤"}.get(equation.relation, equation.relation)
    expected = signs_of_latex(latex(equation.left)) + relation + signs_of_latex(latex(equation.right))
    assert signs_of_mathml(equation_mathml(equation)) == expected


def larger(inner: st.SearchStrategy[Form]) -> st.SearchStrategy[Form]:
    several = st.lists(inner, min_size=2, max_size=4).map(tuple)
    return st.one_of(
        several.map(Sum),
        several.map(Product),
        st.builds(Divided, inner, inner),
        st.builds(Power, inner, st.integers(2, 12)),
        inner.map(Root),
        inner.map(Negative),
    )


LEAVES = st.one_of(
    st.sampled_from(NAMES).map(Symbol),
    st.integers(0, 10**6).map(Integer),
    st.sampled_from(["0.5", "1234.5"]).map(Decimal),
)


@given(st.recursive(LEAVES, larger, max_leaves=25))
def test_any_formula_reads_as_in_latex(form: Form) -> None:
    equation = Equation("eq-1", 1, form, "=", Sum((WIDE, form)))
    expected = f"{signs_of_latex(latex(form))}={signs_of_latex(latex(equation.right))}"
    assert signs_of_mathml(equation_mathml(equation)) == expected
    assert signs_of_mathml(mathml(form)) == signs_of_latex(latex(form))


def test_mathematics_in_a_sentence_stands_where_it_is_said() -> None:
    words = ("With ", Mathematics(Power(Symbol("R1"), 2)), ".")
    read = parsed(html(replace(SAMPLE, blocks=(Paragraph(words),))))
    assert [text_of(p) for p in read.iter(f"{HTML}p")] == ["With R12."]


@pytest.mark.parametrize(
    ("name", "written"),
    [
        ("R1", "<msub><mi>R</mi><mn>1</mn></msub>"),
        ("Rf", '<msub><mi>R</mi><mi mathvariant="normal">f</mi></msub>'),
        ("V_out", "<msub><mi>V</mi><mi>out</mi></msub>"),
        ("S1_R1", '<msub><mi>R</mi><mrow><mi>S1</mi><mo separator="true">,</mo><mn>1</mn></mrow></msub>'),
        ("U1_gain", "<msub><mi>gain</mi><mi>U1</mi></msub>"),
        ("ω0", "<msub><mi>ω</mi><mn>0</mn></msub>"),
        ("pi", "<mi>π</mi>"),
        ("r_min", "<mi>r_min</mi>"),
    ],
)
def test_names_are_set_with_upright_indices(name: str, written: str) -> None:
    assert mathml(Symbol(name)) == f"<math>{written}</math>"


def test_wide_equation_is_broken_before_its_signs() -> None:
    rows = re.findall(r"<mtr><mtd>(.*?)</mtd><mtd>(<mo form=\"infix\">.)?", equation_mathml(equations()[1]))
    assert len(rows) > 3
    assert [bool(head) for head, _ in rows] == [True] + [False] * (len(rows) - 1)
    assert all(sign for _, sign in rows[1:])


PICTURE = """<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" width="36pt"
 onload="f()"><metadata><a/></metadata><style>*{stroke-linecap: butt}</style><script>f()</script>
<defs><path id="m" d="M0 0"/></defs><use xlink:href="#m"/><use xlink:href="http://example.org/#m"/>
<g clip-path="url(#m)" onclick="f()"><foreignObject/></g></svg>"""


def test_picture_keeps_its_ids_and_style_to_itself_and_runs_nothing() -> None:
    assert inline_svg(PICTURE, "p1", "A dot.").replace("\n", "") == (
        '<svg width="36pt" id="p1" role="img" aria-label="A dot." style="min-width:min(29px, 44rem)">'
        "<style>#p1 { *{stroke-linecap: butt} }</style>"
        '<defs><path id="p1-m" d="M0 0" /></defs><use href="#p1-m" /><use /><g clip-path="url(#p1-m)" /></svg>'
    )


def test_picture_with_colours_of_its_own_stands_on_white_paper() -> None:
    assert keeps_colours(PICTURE)
    figure = Figure("fig-9", 9, "plot", "P", "A plot.", PICTURE)
    assert 'class="wide paper"' in html(replace(SAMPLE, blocks=(figure,)))
    assert 'class="wide paper"' not in html(SAMPLE)


def luminance(colour: str) -> float:
    """Return the relative luminance of a colour (W3C, WCAG 2.1, "relative luminance")."""
    parts = [int(colour[k : k + 2], 16) / 255 for k in (1, 3, 5)]
    linear = [part / 12.92 if part <= 0.03928 else ((part + 0.055) / 1.055) ** 2.4 for part in parts]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


@pytest.mark.parametrize("scheme", [0, 1], ids=["light", "dark"])
@pytest.mark.parametrize("below", ["paper", "tint"])
@pytest.mark.parametrize("text", ["ink", "quiet", "link", "warning", "caution"])
def test_text_has_the_contrast_that_wcag_aa_asks_for(scheme: int, below: str, text: str) -> None:
    style = files("symcirc.note").joinpath("note.css").read_text(encoding="utf-8")
    colours = dict(
        re.findall(r"--(\w+): (#\w{6});", re.findall(r":root \{(.*?)\}", style, re.DOTALL)[scheme])
    )
    darker, lighter = sorted(luminance(colours[name]) for name in (below, text))
    assert (lighter + 0.05) / (darker + 0.05) >= 4.5  # success criterion 1.4.3

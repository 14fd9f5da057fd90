"""The note in PDF, read back by PDFium (the reader in common browsers) and by pypdf, which share no code with Typst."""

from __future__ import annotations

import re
import shutil
import socket
import sys
import unicodedata
from collections.abc import Iterator
from functools import cache
from io import BytesIO
from types import SimpleNamespace
from typing import Any, NoReturn

import pypdf
import pypdfium2
import pytest

from symcirc.complaints import Complaint
from symcirc.note import pdf as pdf_module
from symcirc.note.model import (
    Block,
    Document,
    Equation,
    Figure,
    Heading,
    Listing,
    Mathematics,
    Paragraph,
    Table,
)
from symcirc.note.pdf import pdf
from symcirc.note.typst import typst
from symcirc.note.typst_mathematics import LINE, displayed, mathematics
from symcirc.note.typst_text import code_points, pieces_of
from symcirc.transfer.form import Divided, Form, Integer, Negative, Power, Product, Sum, Symbol
from tests.note.sample import ODD_TEXTS, SAMPLE, WIDE

#: The margins' inner edges on an A4 page (ISO 216), in points; a line may stick out by half of its width and a bit.
LEFT, BOTTOM, TOP, STROKE = 25 / 25.4 * 72, 36.0, (297 - 22) / 25.4 * 72, 1.3


@cache
def sample_pdf() -> bytes:
    return pdf(SAMPLE)


def opened(file: bytes) -> BytesIO:
    return BytesIO(file)


def note(*blocks: Block, title: str = "Low-pass") -> Document:
    return Document(title, "2026-12-01", "low.stage", "0f" * 32, blocks)


def squeezed(text: str) -> str:
    """Return text without what depends on the lines: spaces, marks of direction, forms of letters, cut code points."""
    plain = unicodedata.normalize("NFKC", text)
    return re.sub(r"[\s\u200e\u200f\u202a-\u202e\u2066-\u2069\x02\ufffe]", "", plain).replace("⟩⟨", "")


def text_of(file: bytes) -> str:
    with pypdfium2.PdfDocument(file) as document:
        return squeezed("\n".join(page.get_textpage().get_text_range() for page in document))


def shown(text: str) -> str:
    """Return text as the PDF has it on this machine: where no font has a character, by its code point."""
    return squeezed(text) if squeezed(text) in text_of(sample_pdf()) else squeezed(by_code_points(text))


def by_code_points(text: str) -> str:
    return re.sub(r"[\u2e80-\uffef]+", lambda run: code_points(run.group()), text)


#: Texts written from the right: in which order a reader gives their words is its own guess, so each is looked for.
FROM_THE_RIGHT = ("Arabic", "Hebrew")


@pytest.mark.parametrize("name", FROM_THE_RIGHT)
def test_every_word_written_from_the_right_can_be_read(name: str) -> None:
    words = re.findall(r"[\u0590-\u06ff]{2,}", ODD_TEXTS[name])
    assert len(words) >= 3
    assert all(text_of(sample_pdf()).count(word) >= 2 for word in words)


@pytest.mark.parametrize("name", [name for name in ODD_TEXTS if name not in FROM_THE_RIGHT])
def test_every_odd_text_can_be_read(name: str) -> None:
    assert text_of(sample_pdf()).count(shown(ODD_TEXTS[name])) >= 2  # in a paragraph and in the listing


def test_equation_numbers_and_their_references_are_shown() -> None:
    text = text_of(sample_pdf())
    for number in range(1, 11):
        assert f"({number})" in text
    assert "see(1),Table1andFigure2." in text
    with pypdfium2.PdfDocument(sample_pdf()) as document:
        pages = [page.get_textpage().get_text_range() for page in document]
    assert len(re.findall(r"\b\d of \d\b", "\n".join(pages))) == len(pages)


def tables() -> list[Table]:
    return [block for block in SAMPLE.blocks if isinstance(block, Table)]


def test_cells_of_tables_are_shown_in_order() -> None:
    # pypdf gives text in the order of the file, which is cell by cell; PDFium line by line across cells
    text = squeezed("".join(page.extract_text() for page in pypdf.PdfReader(opened(sample_pdf())).pages))
    for table in tables():
        end = text.index(squeezed(f"Table {table.number}: {table.caption}"))
        for cell in (cell for row in (table.header, *table.rows) for cell in row):
            for piece in (piece for piece in cell if isinstance(piece, str)):
                end = text.index(shown(piece), end) + len(shown(piece))


def test_title_file_and_digest_are_on_the_first_page() -> None:
    with pypdfium2.PdfDocument(sample_pdf()) as document:
        first = squeezed(document[0].get_textpage().get_text_range())
    for text in (SAMPLE.title, SAMPLE.date, SAMPLE.file, SAMPLE.digest):
        assert shown(text) in first


def test_names_are_set_with_indices() -> None:
    names = Product(tuple(Symbol(name) for name in ("R1", "S1_Rf", "U1_gain", "V_out", "pi", "ω0", "r_min")))
    text = text_of(pdf(note(Paragraph((Mathematics(names),)))))
    assert "R1RS1,fgainU1Voutπω0r_min" in text
    assert mathematics(Symbol("V_out")) == 'V_"out"'
    assert mathematics(Power(Symbol("R1"), 2)) == 'R_"1"^2'


def boxes(file: bytes) -> Iterator[tuple[Any, tuple[float, float, float, float], float]]:
    with pypdfium2.PdfDocument(file) as document:
        for page in document:
            for thing in page.get_objects(max_depth=1):
                yield thing, thing.get_bounds(), page.get_width()


def assert_within_margins(file: bytes) -> None:
    count = 0
    for _, (left, bottom, right, top), width in boxes(file):
        count += 1
        assert left > LEFT - STROKE
        assert right < width - LEFT + STROKE
        assert bottom > BOTTOM
        assert top < TOP + STROKE
    assert count > 10


def test_nothing_of_the_sample_is_beyond_the_margins() -> None:
    assert_within_margins(sample_pdf())


def many(count: int) -> Sum:
    terms = (Product((Symbol(f"R{k}"), Symbol(f"C{k + 1}"), Symbol("s"))) for k in range(count))
    return Sum(tuple(Negative(term) if k % 3 == 1 else term for k, term in enumerate(terms)))


OVERLONG: dict[str, Form] = {
    "sum": many(200),
    "product": Product(tuple(Sum((Symbol(f"R{k}"), Symbol(f"C{k}"))) for k in range(60))),
    "fraction": Negative(Divided(many(60), Product((many(50), Power(many(40), 2))))),
    "tall fraction": Divided(many(300), Product((many(200), Symbol("R1")))),
    "power": Power(Sum((WIDE, Integer(1))), 3),
    "one name": Symbol("a" * 300),
    "one number": Integer(10**200),
}


@pytest.mark.parametrize("name", OVERLONG)
def test_an_overlong_equation_stays_within_the_margins(name: str) -> None:
    form = OVERLONG[name]
    both = Equation("b", 2, form, "=", form)
    file = pdf(note(Heading(1, "Long"), Equation("a", 1, Symbol("H"), "=", form), both))
    assert_within_margins(file)
    assert {"(1)", "(2)"} <= set(re.findall(r"\(\d\)", text_of(file)))


def height_of_number(form: Form) -> float:
    """Return how high the digit of an equation's number is, in points."""
    with pypdfium2.PdfDocument(pdf(note(Equation("a", 7, Symbol("H"), "=", form)))) as document:
        page = next(page for page in document if page.get_textpage().search("(7)").get_next())
        letters = page.get_textpage()
        found = letters.search("(7)").get_next()
        assert found is not None
        _, low, _, high = letters.get_charbox(found[0] + 1)
    return float(high - low)


@pytest.mark.parametrize("name", ["sum", "product", "fraction", "tall fraction"])
def test_an_overlong_equation_is_broken_and_not_made_smaller(name: str) -> None:
    assert height_of_number(OVERLONG[name]) == pytest.approx(height_of_number(Integer(1)), rel=0.01)
    assert height_of_number(OVERLONG["one name"]) < height_of_number(Integer(1)) / 2


def test_lines_are_broken_before_signs() -> None:
    lines = displayed(Equation("a", 1, Symbol("H"), "=", many(30)), LINE).split("\\\n")
    assert len(lines) > 2
    assert all(re.match(r'& quad "" [+-] ', line) for line in lines[1:])


def test_long_words_everywhere_stay_within_the_margins() -> None:
    word = "W" * 400
    table = Table(
        "t",
        1,
        word,
        ((word,), (word,)),
        (((word,), ("1",)), (("a",), (word, Mathematics(WIDE)))),
        (False, True),
    )
    file = pdf(note(Heading(1, word), Paragraph((word,)), table, Listing(f"{word}\n\t{word}"), title=word))
    assert_within_margins(file)
    assert text_of(file).count("W" * 400) >= 10


def test_pieces_of_words_make_the_text_again() -> None:
    for text in (*ODD_TEXTS.values(), "", "e\u0301" * 40):
        assert "".join(pieces_of(text, 9, 5)) == text
    assert max(len(piece) for piece in pieces_of("x" * 99, 9, 5)) == 5


def test_a_large_drawing_is_made_smaller_and_a_wide_one_gets_a_page_that_lies() -> None:
    def drawing(width: int, height: int) -> Figure:
        path = f"M0 0 L{width} {height}"
        svg = f'<svg xmlns="http://www.w3.org/2000/svg" width="{width}" height="{height}" stroke="currentColor">'
        return Figure("f", 1, "f", "F", "f", f'{svg}<path d="{path}"/></svg>')

    sizes = {}
    for width, height in ((300, 100), (3000, 500), (900, 9000), (3000, 3000)):
        file = pdf(note(Heading(1, "Circuit"), drawing(width, height), Paragraph(("After.",))))
        assert text_of(file).count("Circuit") == 1
        with pypdfium2.PdfDocument(file) as document:
            for page in document:
                for thing in page.get_objects(max_depth=5):
                    left, bottom, right, _ = thing.get_bounds()
                    assert left > LEFT - STROKE
                    assert right < page.get_width() - LEFT + STROKE
                    assert bottom > BOTTOM
            sizes[width, height] = [page.get_width() > page.get_height() for page in document]
    assert sizes == {
        (300, 100): [False],
        (3000, 500): [False, True, False],
        (900, 9000): [False, False],
        (3000, 3000): [False],
    }


def test_drawings_keep_their_words_as_text_in_the_page_s_ink() -> None:
    assert "R1<10kΩ" in text_of(sample_pdf())
    assert "currentColor" not in typst(SAMPLE)


def test_fonts_are_embedded() -> None:
    names = set()
    for page in pypdf.PdfReader(opened(sample_pdf())).pages:
        for font in page["/Resources"].get("/Font", {}).values():
            below = font.get_object()["/DescendantFonts"][0].get_object()
            names.add(str(font.get_object()["/BaseFont"]).split("+")[1])
            assert {"/FontFile2", "/FontFile3"} & set(below["/FontDescriptor"])
    assert {name.split("-")[0] for name in names} >= {
        "LibertinusSerif",
        "NewCMMath",
        "DejaVuSans",
        "DejaVuSansMono",
    }


def test_title_language_date_and_tags_are_in_the_file() -> None:
    reader = pypdf.PdfReader(opened(sample_pdf()))
    assert reader.metadata is not None
    assert squeezed(str(reader.metadata.title)) == shown(SAMPLE.title)
    assert str(reader.metadata.creation_date_raw).startswith("D:20261201000000")
    root = reader.trailer["/Root"]
    assert root["/Lang"] == "en"
    assert root["/MarkInfo"]["/Marked"].value is True
    assert (
        b"<pdfuaid:part>1</pdfuaid:part>" in root["/Metadata"].get_object().get_data()
    )  # ISO 14289-1, clause 5


def elements(reader: pypdf.PdfReader) -> Iterator[Any]:
    waiting = [reader.trailer["/Root"]["/StructTreeRoot"]["/K"]]
    while waiting:
        thing = waiting.pop().get_object()
        if isinstance(thing, list):
            waiting += reversed(thing)
        elif isinstance(thing, dict):
            yield thing
            if "/K" in thing:
                waiting.append(thing["/K"])


def test_figures_and_formulas_have_alternative_texts_and_tables_headers() -> None:
    found = list(elements(pypdf.PdfReader(opened(sample_pdf()))))
    said = {str(element["/Alt"]) for element in found if "/Alt" in element}
    figures = [block for block in SAMPLE.blocks if isinstance(block, Figure)]
    assert said >= {figure.alternative for figure in figures}
    assert "V_out = -(R2/R1)*V_in" in said
    kinds = [element.get("/S") for element in found]
    assert kinds.count("/TH") == sum(len(table.header) for table in tables())
    assert kinds.count("/TD") == sum(len(table.header) * len(table.rows) for table in tables())
    assert kinds.count("/Formula") >= 10
    assert "/H2" in kinds


def test_the_same_note_gives_the_same_bytes() -> None:
    assert pdf(SAMPLE) == sample_pdf()


def test_no_network_is_used(monkeypatch: pytest.MonkeyPatch) -> None:
    def refused(*_: object) -> NoReturn:
        raise AssertionError("a connection")

    monkeypatch.setattr(socket, "socket", refused)
    assert pdf(note(Paragraph(("Text.",)))).startswith(b"%PDF-1.7")
    assert "@preview" not in typst(SAMPLE)


def test_a_missing_package_is_a_complaint_that_says_how_to_install_it(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    monkeypatch.setitem(sys.modules, "typst", None)
    with pytest.raises(Complaint) as caught:
        pdf(SAMPLE)
    assert "pip install 'stagewright[pdf]'" in caught.value.mend


def test_a_character_without_a_font_is_shown_by_its_code_point(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(pdf_module, "_families_for", lambda missing, fonts: ([], missing))
    svg = '<svg xmlns="http://www.w3.org/2000/svg" width="200" height="40"><text x="1" y="20">階</text></svg>'
    words = ODD_TEXTS["Chinese"] + "."
    drawn = Figure("f", 1, "f", "F", words, svg)
    file = pdf(note(Heading(1, words), Paragraph((words,)), drawn, Listing(words), title=words))
    text = text_of(file)
    assert text.count(squeezed(by_code_points(words))) == 4
    assert "⟨U+968E⟩" in text.split("(1)")[0]
    assert "Nofontathandhassomecharacters" in text


def test_a_character_that_only_another_font_has_is_taken_from_there(tmp_path: Any) -> None:
    script = "\U0001d49c"  # MATHEMATICAL SCRIPT CAPITAL A, in STIX and not in DejaVu Sans
    shipped = pdf_module._shipped_fonts()
    assert pdf_module._missing(f"a Ω {script}") == {script}
    fonts: list[Any] = []
    for family in ("DejaVuSans", "STIXGeneral"):
        path = shutil.copy(shipped / f"{family}.ttf", tmp_path)
        fonts.append(SimpleNamespace(family=family, style="normal", weight=400, path=str(path), index=0))
    broken = tmp_path / "broken.ttf"
    broken.write_bytes(b"no font")
    fonts.append(SimpleNamespace(family="A", style="normal", weight=400, path=str(broken), index=0))
    assert pdf_module._families_for({script, "\ue123階"[1]}, fonts) == (["STIXGeneral"], {"階"})


def test_unseen_characters_are_shown() -> None:
    text = text_of(pdf(note(Paragraph(("a\u202eb\x00c\u2028d\ud800e\u00adf",)), Listing("g\u200bh"))))
    assert "a⟨U+202E⟩b⟨U+0000⟩c⟨U+2028⟩d⟨U+D800⟩e⟨U+00AD⟩f" in text
    assert "g⟨U+200B⟩h" in text


def test_letters_of_the_shipped_fonts_can_be_read_back() -> None:
    blocks = (
        range(0xA1, 0x180),
        range(0x391, 0x3CA),
        range(0x410, 0x450),
        range(0x5D0, 0x5EB),
        range(0x627, 0x63B),
    )
    letters = [c for block in blocks for c in map(chr, block) if unicodedata.category(c) not in ("Cf", "Cn")]
    text = text_of(pdf(note(*(Paragraph((c,)) for c in letters))))
    assert "⟨" not in text
    assert [c for c in letters if squeezed(c) not in text] == []


def test_each_page_can_be_painted_and_is_not_empty() -> None:
    with pypdfium2.PdfDocument(sample_pdf()) as document:
        assert len(document) >= 3
        for page in document:
            pixels = page.render(scale=0.5, grayscale=True).to_numpy()
            assert 0.0001 < (pixels < 128).mean() < 0.3

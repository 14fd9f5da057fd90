"""From a sheet to its design note, as a document that every writer writes in its own way."""

from __future__ import annotations

import hashlib
from collections.abc import Callable, Collection, Iterable, Iterator
from functools import cached_property

from symcirc.complaints import Complaint, Place, Source, listed, nearest
from symcirc.note.algebra import derivation_blocks, transfer_blocks
from symcirc.note.amplifiers import Real, amplifier_blocks, real_of
from symcirc.note.chosen import value_blocks
from symcirc.note.closing import caution_blocks, check_blocks, notes_blocks, sheet_blocks
from symcirc.note.equations import design_blocks
from symcirc.note.judged import judge
from symcirc.note.material import Material, gather
from symcirc.note.model import Block, Document, Heading
from symcirc.note.opening import assumption_blocks, circuit_blocks, summary_blocks
from symcirc.note.pieces import Numbering
from symcirc.note.requirement import requirement_blocks
from symcirc.note.response import Response, response_blocks, responses_of
from symcirc.progress import Progress, silent
from symcirc.sheet.model import Sheet

#: The sections by the word that chooses them, in their order, with their headings.
SECTIONS = {
    "summary": "Summary",
    "circuit": "Circuit",
    "requirement": "Requirement",
    "assumptions": "Assumptions",
    "derivation": "Derivation",
    "transfer": "Transfer function",
    "design": "Design equations",
    "values": "Values",
    "response": "Response",
    "amplifiers": "Real amplifiers",
    "checks": "Checks",
    "notes": "Notes",
    "sheet": "The sheet",
    "caution": "Caution",
}


def build_note(sheet: Sheet, date: str, only: Collection[str] = (), progress: Progress = silent) -> Document:
    """Return the note of a sheet, every equation in it proved and judged to hold.

    Args:
        sheet: what it is about.
        date: of the note, ISO 8601.
        only: words of ``SECTIONS``; none for all. A section with nothing to say is left out.
        progress: is told what goes on.

    Raises Complaint for a circuit that cannot be solved, InternalFault where an equation does not hold.

    >>> from symcirc.sheet import read_sheet
    >>> sheet = read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"))
    >>> note = build_note(sheet, "2026-01-31", ["transfer", "caution"])
    >>> [block.text for block in note.blocks if isinstance(block, Heading)]
    ['Transfer function', 'Caution']
    """
    wanted = set(only) or set(SECTIONS)
    material = gather(
        sheet, bool(wanted & {"summary", "circuit", "values", "response", "amplifiers", "checks"}), progress
    )
    blocks = _Writing(material, wanted, progress).blocks()
    digest = hashlib.sha256(sheet.source.text.encode()).hexdigest()
    return Document(sheet.title, date, sheet.source.file, digest, tuple(blocks))


def sections_of(words: str) -> list[str]:
    """Return the sections that ``--only`` names; raises Complaint for a word that is none.

    >>> sections_of("design, values")
    ['design', 'values']
    """
    names = [word.strip() for word in words.split(",") if word.strip()]
    for name in names:
        if name not in SECTIONS:
            place = Place(1, 1, max(2, len(words) + 1), Source("--only", words))
            mend = nearest(name, SECTIONS) or f"the sections are {listed(SECTIONS)}"
            raise Complaint(place, f"`{name}` is no section of a note", mend)
    return names


class _Writing:
    """A note while it is written: the sections, each once, in the order of the note."""

    def __init__(self, material: Material, wanted: Collection[str], progress: Progress) -> None:
        self.material, self.wanted, self.progress = material, wanted, progress
        self.numbering = Numbering()
        self.done: dict[str, list[Block]] = {}

    def blocks(self) -> list[Block]:
        """Return all sections; raises InternalFault where an equation in them does not hold."""
        # Numbers count in the order of the note; what is said at its beginning is known only at its end.
        for name, section in _NUMBERED.items():
            self._write(name, section(self))
        before = [block for blocks in self.done.values() for block in blocks]
        judged = judge(self.material, before)
        self._write("checks", check_blocks(self.material, judged, before, self.numbering))
        self._write("assumptions", assumption_blocks(self.material, self.done.get("derivation", ())))
        self._write("notes", notes_blocks(self.material))
        self._write("sheet", sheet_blocks(self.material))
        self._write("caution", caution_blocks())
        if "summary" in self.wanted:
            moves = () if self.real is None else self.real.moves
            self._write("summary", summary_blocks(self.material, self.responses, moves))
        found: list[Block] = []
        for name, title in SECTIONS.items():
            if self.done.get(name):
                found += [Heading(1, title), *self.done[name]]
        return found

    def _write(self, name: str, section: Iterable[Block]) -> None:
        """Write a section if it is wanted: only then is anything of it computed."""
        if name in self.wanted:
            self.progress(f"writing the note: {SECTIONS[name].lower()}")
            self.done[name] = list(section)

    @cached_property
    def responses(self) -> tuple[Response, ...]:
        """The curves."""
        return responses_of(self.material.valued, self.progress)

    @cached_property
    def real(self) -> Real | None:
        """What real amplifiers do."""
        return real_of(self.material)


def _response(writing: _Writing) -> Iterator[Block]:
    chosen = any(aim.chosen is not None for aim in writing.material.aims)
    values = " with the preferred values" if chosen else ""
    yield from response_blocks(writing.responses, values, writing.numbering)


def _amplifiers(writing: _Writing) -> Iterator[Block]:
    yield from amplifier_blocks(writing.real, writing.numbering)


#: The sections with numbered equations, figures and tables, in their order; the checks follow them.
_NUMBERED: dict[str, Callable[[_Writing], Iterable[Block]]] = {
    "circuit": lambda w: circuit_blocks(w.material, w.numbering),
    "requirement": lambda w: requirement_blocks(w.material, w.numbering),
    "derivation": lambda w: derivation_blocks(w.material, w.numbering),
    "transfer": lambda w: transfer_blocks(w.material, w.numbering),
    "design": lambda w: design_blocks(w.material, w.numbering),
    "values": lambda w: value_blocks(w.material, w.numbering),
    "response": _response,
    "amplifiers": _amplifiers,
}

"""The check of a working: every line read, judged, and put beside those above it."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import pairwise

import mpmath

from symcirc.complaints import Complaint, Source, listed, nearest
from symcirc.derivation import Posed, pose
from symcirc.sheet.expression import Expression, Name, names, rename
from symcirc.sheet.model import GROUND, NodeCurrent, Sheet
from symcirc.working.bounds import Degrees, degrees
from symcirc.working.context import Context, ask_context, delivering_nodes, first_context
from symcirc.working.judges import Judges
from symcirc.working.measured import DIGITS
from symcirc.working.missing import missing_nodes, tried_nodes
from symcirc.working.names import CONSTANTS
from symcirc.working.parse import Chain, Let, Under, parse_line
from symcirc.working.read import read_lines
from symcirc.working.records import Checked, Equation, Line, Verdict
from symcirc.working.truth import truth_of
from symcirc.working.units import is_of_currents, unit_trouble
from symcirc.working.written import Written


def check(sheet: Sheet, source: Source) -> Checked:
    """Check a working against a sheet, its amplifiers ideal.

    Raises Complaint for a sheet that cannot be solved, and a working out of bounds or without any line.

    >>> from symcirc.sheet import read_sheet
    >>> sheet = read_sheet(Source("a.stage", "in -- R1 -- out -- C1 -- gnd\\nask H = V_out/V_in"))
    >>> working = "(V_in - V_out)/R1 = s C1 V_out\\nV_out/V_in = 1/(1 + s R1 C1) = 1/(1 - s R1 C1)"
    >>> [(line.verdict, line.follows) for line in check(sheet, Source("a.work", working)).lines]
    [('holds', False), ('holds', True), ('fails', False)]
    """
    return check_posed(pose(sheet), source)


def check_posed(posed: Posed, source: Source) -> Checked:
    """Check a working against a sheet that is made ready, its amplifiers ideal or real."""
    lines = read_lines(source)
    with mpmath.workdps(DIGITS):
        return Checker(posed).run(lines)


@dataclass(frozen=True)
class Claim:
    """One equality as it was read, number ``position`` of its line; ``is_let`` where a ``let`` says it."""

    written: Written
    position: int
    text: str
    left: Expression
    right: Expression
    is_let: bool

    @property
    def line(self) -> int:
        """The line of the file: in LaTeX a row may go over several."""
        return self.written.line if self.is_let else self.right.place.line


def claims(statement: Chain | Let, written: Written) -> Iterator[Claim]:
    """Yield the equalities of a line."""
    if isinstance(statement, Let):
        for position, (name, value, text) in enumerate(statement.bindings):
            yield Claim(written, position, f"let {text}", name, value, True)
        return
    equalities = zip(pairwise(statement.sides), pairwise(statement.texts), strict=True)
    for position, ((left, right), texts) in enumerate(equalities):
        yield Claim(written, position, " = ".join(texts), left, right, False)


class Checker:
    """The state of a check: the judges with their lexicon, the drives that apply, and the lines so far."""

    def __init__(self, posed: Posed) -> None:
        self.posed = posed
        self.judges = Judges(posed)
        self.lexicon = self.judges.lexicon
        self.context = first_context(posed)
        self.judges.strand(self.context)  # a sheet that cannot be solved is refused before any line is read
        self.degrees: dict[str, Degrees] = {}
        self.lines: list[Line] = []
        self.tried: dict[Context, set[str]] = {}

    def run(self, lines: tuple[Written, ...]) -> Checked:
        """Judge every line in turn."""
        for written in lines:
            try:
                if written.trouble is not None:
                    raise written.trouble
                statement = parse_line(written, self.lexicon)
                if isinstance(statement, Under):
                    self._under(statement.ask)
                    continue
            except Complaint as complaint:
                self._unread(written.line, written.text, complaint)
                continue
            for claim in claims(statement, written):
                try:
                    self.lines.append(self._judged(claim))
                except Complaint as complaint:
                    self._unread(claim.line, claim.text, complaint)
        return Checked(tuple(self.lines), self._missing())

    def _unread(self, line: int, text: str, complaint: Complaint) -> None:
        note = f"{complaint.cause}; {complaint.mend}"
        self.lines.append(Line(line, text.strip(), "unread", None, note, complaint=complaint))

    def _under(self, ask: Name) -> None:
        known = [ask.name for ask in self.posed.sheet.asks]
        if ask.text not in known:
            mend = nearest(ask.text, known) or f"the sheet asks for {listed(known)}"
            raise Complaint(ask.place, f"`{ask.text}` is nothing that the sheet asks for", mend)
        context = ask_context(self.posed, ask.text)
        self.judges.strand(context)
        self.context = context

    # one equality -----------------------------------------------------------------------------------------------

    def _judged(self, claim: Claim) -> Line:
        if claim.is_let and isinstance(claim.left, Name) and self._may_name(claim.left.text):
            return self._define(claim, claim.left, self._looked_up(claim.right))
        left, right = self._looked_up(claim.left), self._looked_up(claim.right)
        for side, other in () if claim.is_let else ((left, right), (right, left)):
            if self._is_new_name(side) and all(self.lexicon.is_key(name.text) for name in names(other)):
                assert isinstance(side, Name)
                return self._define(claim, side, other)
        for name in (*names(left), *names(right)):
            self._check_name(name)
        return self._equality(claim, left, right)

    def _looked_up(self, side: Expression) -> Expression:
        """Return a side with the names that were new when its line was read, and are known now, by their keys."""

        def key(name: Name) -> str:
            if self.lexicon.is_key(name.text):
                return name.text
            meaning = self.lexicon.meaning(name.text)
            return name.text if meaning is None else meaning.key

        return rename(side, key)

    def _is_new_name(self, side: Expression) -> bool:
        return isinstance(side, Name) and not self.lexicon.is_key(side.text)

    def _may_name(self, name: str) -> bool:
        """Tell whether a ``let`` may give this name: a new one, or one that the language has but the sheet has not."""
        meaning = self.lexicon.meaning(name)
        return meaning is None or meaning.kind == "quantity" or meaning.key in CONSTANTS.values()

    def _check_name(self, name: Name) -> None:
        """Raise Complaint for a name that stands for nothing, or for a current that nothing delivers."""
        if not self.lexicon.is_key(name.text):
            raise self.lexicon.unknown(name.text, name.place)
        quantity = self.lexicon.by_key(name.text).quantity
        if isinstance(quantity, NodeCurrent) and quantity.node not in delivering_nodes(self.posed):
            raise Complaint(
                name.place,
                f"nothing delivers a current into node `{quantity.node}`",
                "name the current of a part, as in I_R1",
            )

    def _define(self, claim: Claim, name: Name, value: Expression) -> Line:
        for used in names(value):
            self._check_name(used)
        size = degrees(value, self.degrees)
        notes = [unit_trouble(value, value, self.lexicon)]
        if name.text[:2] in ("V_", "I_") and self.lexicon.meaning(name.text) is None:
            hint = nearest(name.text, self.lexicon.known())
            notes.append(f"`{name.text}` is a new name here; {hint}" if hint else None)
        self.degrees[self.lexicon.define(name.text, value)] = size
        return Line(claim.line, claim.text, "defines", None, _joined(notes))

    def _equality(self, claim: Claim, left: Expression, right: Expression) -> Line:
        for side in (left, right):
            degrees(side, self.degrees)
        truth = truth_of(left, right, self.context, self.judges)
        follows, row = self.judges.strand(self.context).take(left, right)
        verdict: Verdict = "holds" if truth.holds else "fails"
        if not truth.holds and follows and self._something_failed():
            verdict = "carried"
        if truth.holds and row:
            self.judges.strand(self.context).kept.append((row, is_of_currents(left, self.lexicon)))
        elif not truth.holds:
            self._remember_try(left, right)
        note = _joined([truth.note, unit_trouble(left, right, self.lexicon)])
        names_then = self.lexicon if truth.holds else self.lexicon.copy()
        equation = Equation(left, right, self.context, claim.written, claim.position, names_then)
        return Line(claim.line, claim.text, verdict, follows, note, equation=equation)

    def _something_failed(self) -> bool:
        return any(line.verdict == "fails" for line in self.lines)

    # what is missing --------------------------------------------------------------------------------------------

    def _remember_try(self, left: Expression, right: Expression) -> None:
        parts = frozenset(name.text for side in (left, right) for name in names(side))
        incident: dict[str, set[str]] = {node: set() for node in self.posed.circuit.node_places}
        for part in self.posed.circuit.parts:
            for node in (part.first, part.second):
                incident.setdefault(node, set()).add(part.name)
        at = {node: frozenset(names_) for node, names_ in incident.items() if node != GROUND}
        self.tried.setdefault(self.context, set()).update(tried_nodes(parts, at))

    def _missing(self) -> tuple[str, ...]:
        """Return the nodes that are missing in every context in which there is a line, by their labels.

        A law that was used under one ask was used: with ``under`` a working may take it on either side.
        """
        found: list[list[str]] = []
        labels = self.posed.circuit.node_labels
        for context, strand in list(self.judges.strands.items()):
            tried = frozenset(self.tried.get(context, set()))
            if not strand.symbols or not (strand.kept or tried):
                continue
            own = self.judges.strand(ask_context(self.posed, context.setup.ask))
            nodes = missing_nodes(own.symbols[0].residues, strand.symbols[0].residues, strand.kept, tried)
            found.append([labels.get(node, node) for node in nodes])
        everywhere = set.intersection(*map(set, found)) if found else set()
        return tuple(label for label in found[0] if label in everywhere) if found else ()


def _joined(notes: list[str | None]) -> str | None:
    return "; ".join(note for note in notes if note) or None

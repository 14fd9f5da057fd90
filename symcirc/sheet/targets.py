"""Targets: kinds, families and their words, values kept as written."""

from __future__ import annotations

from collections.abc import Mapping

from symcirc.complaints import Complaint, Place, choices, listed, nearest
from symcirc.sheet import statements as st
from symcirc.sheet.expression import Name
from symcirc.sheet.fixes import Settled
from symcirc.sheet.formulas import check_names, check_size
from symcirc.sheet.limits import known_ask
from symcirc.sheet.model import Symbol, Target, Value
from symcirc.sheet.trial import try_out
from symcirc.sheet.words import EXAMPLES, check_word, read_order, refuse_empty

KINDS = ("lowpass", "highpass", "bandpass", "bandstop", "allpass")
#: Each family with the words it needs besides its order and its edge.
FAMILIES: dict[str, tuple[str, ...]] = {
    "butterworth": (),
    "chebyshev": ("ripple",),
    "inverse chebyshev": ("stop",),
    "elliptic": ("ripple", "stop"),
    "bessel": (),
    "gaussian": (),
    "legendre": (),
    "linear phase": ("ripple",),
    "critical": (),
}


def read_targets(
    lines: list[st.TargetLine],
    asks: Mapping[str, Place],
    limited: set[str],
    symbols: Mapping[str, Symbol],
    settled: Settled,
) -> tuple[Target, ...]:
    """Return the targets; ``limited`` are the asks that have a limit.

    Raises Complaint for words, units, values or names that do not fit together.
    """
    targets: dict[str, Target] = {}
    for line in lines:
        name = line.name
        known_ask(name, asks)
        if name.text in targets:
            first = targets[name.text].place.line
            raise Complaint(
                name.place,
                f"`{name.text}` has two targets: one is on line {first} already",
                "keep one, or ask the same ratio under a second name",
            )
        match line:
            case st.FormulaLine():
                targets[name.text] = _read_formula(line, symbols, settled)
            case st.ShapeLine():
                targets[name.text] = _read_shape(line, limited, symbols, settled)
    return tuple(targets.values())


def _read_formula(line: st.FormulaLine, symbols: Mapping[str, Symbol], settled: Settled) -> Target:
    check_names(line.expression, symbols, s_allowed=True)
    check_size(line.expression, settled.sizes)
    if try_out(line.expression, settled.trials).is_zero:
        raise Complaint(
            line.expression.place, "this target is zero", "write the ratio that the ask must become"
        )
    return Target(line.name.text, None, None, {}, False, line.expression, line.name.place)


def _read_shape(
    line: st.ShapeLine, limited: set[str], symbols: Mapping[str, Symbol], settled: Settled
) -> Target:
    kind, family = _kind_and_family(line.shape)
    words: dict[str, Value] = {}
    _check_meets(line, family, limited)
    for word, value, place in _written_words(line):
        if word in words:
            raise Complaint(place, f"`{word}` is given twice", "remove one of the two")
        _check_belongs(word, place, line.shape, family)
        check_word(word, value, symbols, settled)
        words[word] = read_order(value, settled) if word == "order" else value
    _check_complete(words, line, family)
    _check_together(words, family, settled)
    return Target(line.name.text, kind, family, words, bool(line.meets), None, line.name.place)


def _kind_and_family(shape: tuple[Name, ...]) -> tuple[str, str | None]:
    kind, *family_words = shape
    if kind.text not in KINDS:
        mend = nearest(kind.text, KINDS) or choices(KINDS)
        if kind.text in FAMILIES:
            mend = f"write the kind before the family: lowpass {kind.text}"
        elif family_words and kind.text + family_words[0].text in KINDS:
            mend = f"write it as one word: {kind.text}{family_words[0].text}"
        raise Complaint(kind.place, f"`{kind.text}` is not a kind of response", mend)
    family = " ".join(word.text for word in family_words) or None
    if family is not None and family not in FAMILIES:
        raise Complaint(
            family_words[0].place,
            f"`{family}` is not a family of responses",
            nearest(family, FAMILIES) or choices(FAMILIES),
        )
    if kind.text == "allpass" and family not in (None, "bessel"):
        raise Complaint(
            family_words[0].place,
            f"there is no {family} all-pass, as its gain is the same everywhere",
            "write: allpass bessel, order 2, edge 1 kHz",
        )
    return kind.text, family


def _check_meets(line: st.ShapeLine, family: str | None, limited: set[str]) -> None:
    if not line.meets:
        return
    first = line.meets[0]
    if len(line.meets) > 1:
        raise Complaint(line.meets[1].place, "`meet limits` is given twice", "remove one of the two")
    if family is None:
        raise Complaint(
            first.place, "`meet limits` chooses the order of a family, and none is named", "name a family"
        )
    orders = [r.word for r in line.requirements if r.word.text == "order"]
    if orders:
        raise Complaint(
            max(orders[0].place, first.place),
            "`meet limits` stands instead of an order, and both are here",
            "keep one of the two",
        )
    if line.name.text not in limited:
        raise Complaint(
            first.place,
            f"`{line.name.text}` has no limits to meet",
            f"add a line such as: limit {line.name.text}: loss >= 20 dB above 5 kHz",
        )


def _written_words(line: st.ShapeLine) -> list[tuple[str, Value, Place]]:
    """Return every word with its value and place, in the order in which they are written."""
    words = [(r.word.text, r.value, r.word.place) for r in line.requirements]
    for requirement in line.requirements:
        if requirement.at is None:
            continue
        if requirement.word.text != "edge":
            raise Complaint(
                requirement.at.place,
                f"`at` belongs to `edge`, not to `{requirement.word.text}`",
                "write: edge 1 kHz at 1 dB",
            )
        words.append(("edge loss", requirement.at, requirement.at.place))
    for edges in line.edges:
        words += [("lower edge", edges.low, edges.place), ("upper edge", edges.high, edges.place)]
    return sorted(words, key=lambda word: word[2])


def _frequencies(kind: str, family: str | None) -> tuple[tuple[str, ...], ...]:
    """Return the groups of words of which one group must be given to place a response in frequency."""
    if family is None:
        return (("f0",),)
    if kind in ("bandpass", "bandstop"):
        return ("centre", "bandwidth"), ("lower edge", "upper edge")
    return (("edge",),)


def _needs(family: str | None) -> tuple[str, ...]:
    return ("q",) if family is None else FAMILIES[family]


def _check_belongs(word: str, place: Place, shape: tuple[Name, ...], family: str | None) -> None:
    kind = shape[0].text
    frequencies = [w for group in _frequencies(kind, family) for w in group]
    optional = ["edge loss"] if "edge" in frequencies else []
    if word in ("order", "gain", *frequencies, *_needs(family), *optional):
        return
    if family is None:
        raise Complaint(
            place,
            f"`{word}` belongs to a family, and none is named",
            f"name one, as in {kind} butterworth, or give f0 and q",
        )
    own = ("order", *frequencies, *_needs(family), "gain")
    shown = dict.fromkeys("edges" if "edge" in w else w for w in own) if len(frequencies) > 1 else own
    raise Complaint(
        place,
        f"`{word}` does not belong to a {kind} {family} target",
        f"use its own words: {listed(shown)}",
    )


def _check_complete(words: Mapping[str, Value], line: st.ShapeLine, family: str | None) -> None:
    if family is None and "order" in words and try_out(words["order"].expression, {}).whole != 2:
        raise Complaint(
            words["order"].place,
            "f0 and q describe order 2",
            "write order 2, or name a family for another order",
        )
    wanted = [*_needs(family), *(() if line.meets else ("order",))]
    groups = _frequencies(line.shape[0].text, family)
    given = [group for group in groups if any(word in words for word in group)]
    wanted += (given or groups)[0]
    missing = [word for word in wanted if word not in words]
    if missing:
        form = " ".join(word.text for word in line.shape)
        raise Complaint(
            line.shape[0].place,
            f"this {form} target lacks {listed(missing)}",
            f"add: {', '.join(dict.fromkeys(EXAMPLES[word] for word in missing))}",
        )
    if len(given) > 1:
        place = max(words[group[0]].place for group in given)
        raise Complaint(place, "a band is given twice, by its centre and by its edges", "keep one of the two")


def _check_together(words: Mapping[str, Value], family: str | None, settled: Settled) -> None:
    """Raise Complaint where words fit one by one, and not together."""
    if "ripple" in words:
        unit = "deg" if family == "linear phase" else "dB"
        if words["ripple"].unit != unit:
            raise Complaint(
                words["ripple"].place, f"the ripple of {family} is in {unit}", f"write: ripple 0.5 {unit}"
            )
    if "lower edge" in words:
        refuse_empty(words["lower edge"], words["upper edge"], settled)

"""What is fixed: numbers with their units, and ties."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

import sympy

from symcirc.complaints import Complaint, Place
from symcirc.sheet.exact import exact_number, in_bounds, is_number, sign_of
from symcirc.sheet.expand import Flat, FlatSetting
from symcirc.sheet.expression import Expression, Name, names, rename
from symcirc.sheet.formulas import Size, check_names, check_size
from symcirc.sheet.model import Fix, Symbol
from symcirc.sheet.namespace import Namespace
from symcirc.sheet.trial import Trial, free, known, try_out
from symcirc.sheet.units import check_unit, in_base_units


@dataclass(frozen=True)
class Settled:
    """The fixes of a sheet, the sizes of its ties, and the trials of all its symbols."""

    fixes: dict[str, Fix] = field(default_factory=dict)
    sizes: dict[str, Size] = field(default_factory=dict)
    trials: dict[str, Trial] = field(default_factory=dict)


def settle(flat: Flat, namespace: Namespace) -> Settled:
    """Return what each fixed name is set to.

    Raises Complaint for a name fixed twice, an unknown name, a unit that does not fit, a value that cannot
    be, an expression out of bounds or dividing by zero, and a loop of fixes.
    """
    fixes: dict[str, Fix] = {}
    for setting in flat.settings:
        fix = _fix(setting, namespace)
        first = fixes.get(fix.name)
        if first is None:
            fixes[fix.name] = fix
        elif first.place != fix.place or not _is_global(setting, namespace):
            label = namespace.symbols[fix.name].label
            raise Complaint(
                fix.place,
                f"`{label}` is fixed twice: it is fixed on line {first.place.line} already",
                "remove one of the two",
            )
    settled = Settled(fixes)
    _settle_ties(settled, namespace)
    return settled


def _is_global(setting: FlatSetting, namespace: Namespace) -> bool:
    """Tell whether a block's fix says the same in every use: it holds none of the block's names."""
    words = (setting.name, *names(setting.value.expression))
    return all(namespace.name(word, setting) == word.text for word in words)


def _fix(setting: FlatSetting, namespace: Namespace) -> Fix:
    value, place = setting.value, setting.name.place
    symbol = namespace.symbols[namespace.name(setting.name, setting)]
    check_unit(value, symbol)
    if is_number(value.expression):
        number = in_base_units(exact_number(value.expression), value, symbol)
        check_number(number, symbol, namespace, value.place)
        return Fix(symbol.name, value.expression, number, value.unit, place)
    expression = rename(value.expression, lambda name: namespace.name(name, setting))
    check_names(expression, namespace.symbols, s_allowed=True)
    return Fix(symbol.name, expression, None, None, place)


def check_number(number: sympy.Expr, symbol: Symbol, namespace: Namespace, place: Place) -> None:
    """Raise Complaint for a number that the name cannot have."""
    refused = namespace.refused_signs(symbol)
    sign = sign_of(number)
    if sign in refused:
        raise _wrong_sign(symbol, sign, refused, place)
    if not in_bounds(number):
        raise _out_of_range(symbol, place)


def _wrong_sign(symbol: Symbol, sign: int, refused: tuple[int, ...], place: Place) -> Complaint:
    return Complaint(
        place,
        f"`{symbol.label}` cannot be {'zero' if sign == 0 else 'negative'}",
        "give it a value greater than zero, or leave it out" if -1 in refused else "give it another value",
    )


def _out_of_range(symbol: Symbol, place: Place) -> Complaint:
    return Complaint(
        place,
        f"the value of `{symbol.label}` is out of range",
        "use a value between 1e-30 and 1e30 in size",
    )


# ties -------------------------------------------------------------------------------------------------------


def _settle_ties(settled: Settled, namespace: Namespace) -> None:
    """Try every tie with the numbers that are there, the inner ones first."""
    fixes, sizes, trials = settled.fixes, settled.sizes, settled.trials
    order = tie_order({name: fix.expression for name, fix in fixes.items() if fix.number is None})
    for name, symbol in namespace.symbols.items():
        number = fixes[name].number if name in fixes else None
        if number is not None:
            trials[name] = known(number)
        elif name not in fixes:
            positive = -1 in namespace.refused_signs(symbol) and not namespace.is_general(symbol)
            trials[name] = free(name, positive=positive)
    with_s = {"s"}
    for name in order:
        symbol, expression = namespace.symbols[name], fixes[name].expression
        inner = next((n for n in names(expression) if n.text in with_s), None)
        if inner is not None:
            with_s.add(name)
            if not namespace.may_hold_s(symbol):
                raise _no_s_here(symbol, inner)
        sizes[name] = check_size(expression, sizes)
        trials[name] = try_out(expression, trials)
        _check_trial(trials[name], symbol, namespace, expression.place)


def _no_s_here(symbol: Symbol, name: Name) -> Complaint:
    depends = (
        "`s` cannot stand here"
        if name.text == "s"
        else f"`{symbol.label}` would depend on s, as `{name.text}` does"
    )
    return Complaint(name.place, depends, "only Z, Y, an amplifier's gain and a target may depend on s")


def _check_trial(trial: Trial, symbol: Symbol, namespace: Namespace, place: Place) -> None:
    refused = namespace.refused_signs(symbol)
    sign = 0 if trial.is_zero else trial.sign
    if sign == -1 and namespace.is_general(symbol) and not trial.is_known:
        return  # an impedance in names may be a negative one
    if sign is not None and sign in refused:
        raise _wrong_sign(symbol, sign, refused, place)
    if trial.is_known and not trial.in_bounds:
        raise _out_of_range(symbol, place)


def tie_order(ties: Mapping[str, Expression]) -> list[str]:
    """Return the tied names so that each comes after the tied names that its expression holds.

    Raises Complaint where they go in a loop.

    >>> tie_order({})
    []
    """
    order: list[str] = []
    done: set[str] = set()
    for start in ties:
        path: dict[str, Iterator[Name]] = {}
        if start not in done:
            path[start] = names(ties[start])
        while path:
            current = next(reversed(path))
            inner = next((n for n in path[current] if n.text in ties and n.text not in done), None)
            if inner is None:
                del path[current]
                done.add(current)
                order.append(current)
            elif inner.text in path:
                raise _loop([*path], inner)
            else:
                path[inner.text] = names(ties[inner.text])
    return order


def _loop(path: list[str], again: Name) -> Complaint:
    loop = path[path.index(again.text) :]
    shown = loop if len(loop) < 8 else [*loop[:3], "...", *loop[-3:]]
    return Complaint(
        again.place,
        f"these fixes go in a loop: {' -> '.join([*shown, again.text])}",
        "set one of them to a value, or choose it",
    )

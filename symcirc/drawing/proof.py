"""Every drawing is read back and compared with the circuit before anyone sees it."""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from symcirc.complaints import InternalFault, listed
from symcirc.drawing.bodies import Body
from symcirc.drawing.marks import misread_marks
from symcirc.drawing.reading import Reading, read_back, read_picture
from symcirc.sheet.model import GROUND


def prove(svg: str, bodies: tuple[Body, ...], labels: Mapping[str, str]) -> Reading:
    """Return the reading of a drawing that is the circuit; raises InternalFault where it is not.

    Args:
        svg: the drawing as written.
        bodies: what must be on it, with the nets of their pins.
        labels: how the nets are called on the drawing.
    """
    picture = read_picture(svg)
    reading = read_back(picture)
    wrong = [*reading.ambiguous, *_differences(reading, bodies, labels)]
    wrong += [words for sign in picture.signs for words in misread_marks(sign)]
    drawn = sorted((sign.name, sign.kind) for sign in picture.signs if sign.kind != "ground")
    if drawn != sorted((body.name, body.kind) for body in bodies):
        wrong.append("the parts drawn are not those of the circuit")
    if wrong:
        raise InternalFault(f"the drawing is not the circuit: {listed(wrong[:3])}")
    return reading


def _differences(reading: Reading, bodies: tuple[Body, ...], labels: Mapping[str, str]) -> Iterator[str]:
    nets: dict[str, set[tuple[str, str]]] = {}
    for body in bodies:
        for pin in body.pins:
            nets.setdefault(pin.net, set()).add((body.name, pin.role))
    grounded = frozenset(nets.pop(GROUND, ()))
    named = {labels[net]: frozenset(pins) for net, pins in nets.items()}
    yield from (
        f"the name {name} stands beside another node" for name, at in reading.names if named[name] != at
    )
    for pins in {frozenset(pins) for pins in nets.values()} ^ reading.nets:
        yield f"only one of the two joins {listed(sorted(f'{name} {role}' for name, role in pins))}"
    if grounded != reading.grounded:
        odd = sorted(f"{name} {role}" for name, role in grounded ^ reading.grounded)
        yield f"only one of the two grounds {listed(odd)}"

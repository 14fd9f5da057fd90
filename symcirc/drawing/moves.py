"""The small moves of the search: what changes, and whose cost may change with it."""

from __future__ import annotations

from collections.abc import Iterator
from random import Random

from symcirc.drawing.cost import Judge
from symcirc.drawing.layout import STANDING, Layout

#: A change of the placement: the list, the index in it, and the new value.
Change = tuple[list[int], int, int]
Proposal = tuple[list[Change], set[int]]
NOTHING: Proposal = ([], set())


class Moves:
    """Proposes random moves of a placement."""

    def __init__(self, layout: Layout, judge: Judge, random: Random) -> None:
        self.layout = layout
        self.problem = problem = layout.problem
        self.random = random
        self.count = len(problem.bodies)
        self.everything = set(range(self.count + len(problem.nets)))
        self.turning = [n for n, turns in enumerate(problem.turns) if turns]
        self.jogs = [
            (n, pin)
            for n, body in enumerate(problem.bodies)
            if len(body.pins) != 2
            for pin, net in enumerate(problem.net_of[n])
            if net >= 0
        ]
        self.devices = [n for n, body in enumerate(problem.bodies) if body.is_device]
        self.of_body = [self._of_body(n, judge) for n in range(self.count)]
        self.of_net = [self._of_net(n) for n in range(len(problem.nets))]
        kinds = [
            (self._shift_body, 16),
            (self._align_body, 20),
            (self._shift_trunk, 14),
            (self._align_trunk, 12),
        ]
        kinds += [(self._flip, 5), (self._cut, 6), (self._swap_trunks, 4)]
        if self.turning:
            kinds += [(self._stand, 2), (self._swap_rows, 5)]
        if self.jogs:
            kinds += [(self._jog, 8)]
        if self.devices:
            kinds += [(self._shift_group, 8)]
        self.kinds = [kind for kind, _ in kinds]
        self.weights = [weight for _, weight in kinds]
        self.cumulative = [sum(self.weights[: n + 1]) for n in range(len(self.weights))]

    def _of_body(self, body: int, judge: Judge) -> set[int]:
        nets = {self.count + net for net in self.problem.net_of[body] if net >= 0}
        fed = {n for n, ends in judge.feedback.items() if any(device == body for device, _ in ends)}
        return {body} | nets | fed

    def _of_net(self, net: int) -> set[int]:
        turning = [n for n in self.problem.bodies_of[net] if self.problem.turns[n]]
        others = {self.count + other for n in turning for other in self.problem.net_of[n]}
        return {self.count + net, *turning, *others}

    def propose(self) -> Proposal:
        """Return a random move: its changes, and the bodies and nets whose cost may change."""
        return self.random.choices(self.kinds, cum_weights=self.cumulative)[0]()

    def _step(self) -> int:
        return self.random.choice((-4, -3, -2, -1, -1, 1, 1, 2, 3, 4))

    def _body(self) -> int:
        return self.random.randrange(self.count)

    def _net(self) -> int:
        return self.random.randrange(len(self.problem.nets))

    def _shift_body(self) -> Proposal:
        body = self._body()
        layout = self.layout
        where = layout.y if self.random.random() < 0.5 or not layout.standing[body] else layout.x
        return self._shifted(body, where, self._step())

    def _shifted(self, body: int, where: list[int], step: int) -> Proposal:
        changes = [(where, body, where[body] + step)]
        if where is self.layout.y and self.problem.bodies[body].is_device:
            jogs = self.layout.jog[body]
            changes += [(jogs, pin, jogs[pin] + step) for pin in range(len(jogs))]
        return changes, self.of_body[body]

    def _align_body(self) -> Proposal:
        """Put one of a body's pins into the row, or onto the trunk, of another pin of its net."""
        body, layout = self._body(), self.layout
        mine = [pin for pin in layout.pins(body) if self.problem.net_of[body][pin.number] >= 0]
        pin = self.random.choice(mine)
        net = self.problem.net_of[body][pin.number]
        if layout.standing[body] and self.random.random() < 0.4:
            return self._shifted(
                body, layout.x, layout.trunk[net] + self.random.choice((-1, 0, 0, 0, 1)) - int(pin.x)
            )
        others = [other for other in layout.net_pins(net) if other.body != body]
        if not others:
            return NOTHING
        return self._shifted(body, layout.y, self.random.choice(others).y - pin.y)

    def _shift_trunk(self) -> Proposal:
        net = self._net()
        return [(self.layout.trunk, net, self.layout.trunk[net] + self._step())], self.of_net[net]

    def _align_trunk(self) -> Proposal:
        net = self._net()
        pins = self.layout.net_pins(net)
        x = int(self.random.choice(pins).x) + self.random.choice((-1, 0, 0, 1))
        return [(self.layout.trunk, net, x)], self.of_net[net]

    def _flip(self) -> Proposal:
        body, layout = self._body(), self.layout
        bits = (
            1 if not self.problem.bodies[body].is_device or len(self.problem.bodies[body].right) == 1 else 3
        )
        if layout.standing[body] and self.problem.turns[body]:
            bits = 3
        bit = self.random.choice((1, 2)) if bits == 3 else 1
        changes: list[Change] = [(layout.flip, body, layout.flip[body] ^ bit)]
        return changes, self.of_body[body]

    def _stand(self) -> Proposal:
        body, layout = self.random.choice(self.turning), self.layout
        changes: list[Change] = [(layout.standing, body, 1 - layout.standing[body])]
        changes.append((layout.flip, body, self.random.randrange(4)))
        if layout.standing[body]:
            changes.append((layout.y, body, layout.y[body] + self.random.choice((0, STANDING))))
        else:
            net = self.random.choice(self.problem.net_of[body])
            changes.append((layout.x, body, layout.trunk[net]))
            changes.append((layout.y, body, layout.y[body] - self.random.choice((0, STANDING))))
        return changes, self.of_body[body]

    def _jog(self) -> Proposal:
        body, pin = self.random.choice(self.jogs)
        jogs = self.layout.jog[body]
        if self.random.random() < 0.5:
            row = jogs[pin] + self._step()
        else:
            row = self.layout.y[body] + self.random.choice((-4, -3, 3, 4))
        return [(jogs, pin, row)], self.of_body[body]

    def _swap_trunks(self) -> Proposal:
        one, other, trunk = self._net(), self._net(), self.layout.trunk
        return [(trunk, one, trunk[other]), (trunk, other, trunk[one])], self.of_net[one] | self.of_net[other]

    def _swap_rows(self) -> Proposal:
        one, other, y = self.random.choice(self.turning), self.random.choice(self.turning), self.layout.y
        return [(y, one, y[other]), (y, other, y[one])], self.of_body[one] | self.of_body[other]

    def _cut(self) -> Proposal:
        """Move everything beyond a line, so that room is made or taken."""
        across = self.random.random() < 0.6
        at = self.random.choice(self.layout.x if across else self.layout.y)
        return self._cut_at(across, at, self.random.choice((-3, -2, -1, -1, 1, 2)))

    def _cut_at(self, across: bool, at: int, step: int) -> Proposal:
        layout = self.layout
        lists = [layout.x, layout.trunk] if across else [layout.y, *layout.jog]
        changes = [(where, n, old + step) for where in lists for n, old in enumerate(where) if old >= at]
        return changes, self.everything

    def all_cuts(self) -> Iterator[Proposal]:
        """Yield the moves that take room at any line, across and down, widest first."""
        for across in (True, False):
            lists = [self.layout.x, self.layout.trunk] if across else [self.layout.y]
            for at in sorted({old for where in lists for old in where}, reverse=True):
                for step in (-6, -3, -2, -1):
                    yield self._cut_at(across, at, step)

    def all_shifts(self) -> Iterator[Proposal]:
        """Yield the moves of each body and each trunk by a few steps."""
        layout = self.layout
        for step in (-4, -3, -2, -1, 1, 2, 3, 4):
            for body in range(self.count):
                yield self._shifted(body, layout.y, step)
                yield self._shifted(body, layout.x, step)
            for net in range(len(self.problem.nets)):
                yield [(layout.trunk, net, layout.trunk[net] + step)], self.of_net[net]
            for body, pin in self.jogs:
                jogs = layout.jog[body]
                yield [(jogs, pin, jogs[pin] + step)], self.of_body[body]

    def _shift_group(self) -> Proposal:
        """Move a device with the nets and parts about it."""
        device, layout = self.random.choice(self.devices), self.layout
        step = self._step()
        nets = {net for net in self.problem.net_of[device] if net >= 0}
        near = {
            n for net in nets for n in self.problem.bodies_of[net] if not self.problem.bodies[n].is_device
        }
        touched = set(self.of_body[device])
        changes: list[Change] = []
        if self.random.random() < 0.5:
            changes += [(layout.y, n, layout.y[n] + step) for n in near]
            changes.append((layout.y, device, layout.y[device] + step))
            changes += [(layout.jog[device], pin, row + step) for pin, row in enumerate(layout.jog[device])]
        else:
            changes += [(layout.x, n, layout.x[n] + step) for n in near]
            changes.append((layout.x, device, layout.x[device] + step))
            changes += [(layout.trunk, net, layout.trunk[net] + step) for net in nets]
            touched |= {n for net in nets for n in self.of_net[net]}
        for n in near:
            touched |= self.of_body[n]
        return changes, touched

"""One graph along an order of the parts: who enters the frontier, which edges come, who leaves.

The frontier is the list of nodes that parts already decided share with parts still to come. A state of the
walk is its partition into connected blocks, written as a growth string: the block numbers of the nodes in
turn, numbered by first appearance. Blocks are ordered by these numbers, and every untouched node is a block
after all of them, in order of entry; so a step can be told by positions alone, and equal steps of a long
circuit share one table.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cache

from symcirc.trees.laws import Edge

#: A partition of the frontier as a growth string.
Partition = bytes
#: Positions in the frontier of the two ends of an edge.
Positions = tuple[int, int]


#: A partition is a byte string, which has room for so many blocks.
_WIDEST = 255


class TooManyStates(Exception):
    """The walk would need more states than it was allowed, or than could ever be walked."""


@dataclass(frozen=True)
class Step:
    """What one part does to the frontier of one graph.

    ``entering`` nodes are appended, one of the ``edges`` lists (one for each choice) is contracted, the nodes
    at the positions ``leaving`` (descending) go. ``closing`` says that no node is left afterwards.
    """

    entering: int
    edges: tuple[tuple[Positions, ...], ...]
    leaving: tuple[int, ...]
    closing: bool


def steps(nodes: Sequence[str], levels: Sequence[Sequence[tuple[Edge, ...]]]) -> Iterator[Step]:
    """Yield the step of every level.

    Args:
        nodes: all nodes of the graph.
        levels: for every level, the edges of each of its choices.

    Raises:
        TooManyStates: the frontier is wider than a partition can be.

    >>> list(steps(["a", "b"], [[(("a", "b"),), ()]]))
    [Step(entering=2, edges=(((0, 1),), ()), leaving=(1, 0), closing=True)]
    """
    last: dict[str, int] = dict.fromkeys(nodes, 0)
    touched: list[list[str]] = []
    for number, choices in enumerate(levels):
        here = list(dict.fromkeys(node for edges in choices for edge in edges for node in edge))
        touched.append(here)
        for node in here:
            last[node] = number
    lonely = set(nodes).difference(*touched)
    waiting = len(nodes)
    frontier: list[str] = []
    for number, choices in enumerate(levels):
        entering = [node for node in touched[number] if node not in frontier]
        if not number:
            entering += [node for node in nodes if node in lonely]
        frontier += entering
        if len(frontier) > _WIDEST:
            raise TooManyStates(f"a frontier of {len(frontier)} nodes")
        waiting -= len(entering)
        place = {node: position for position, node in enumerate(frontier)}
        edges = tuple(tuple((place[one], place[two]) for one, two in choice) for choice in choices)
        going = touched[number] if number else [*touched[number], *lonely]
        leaving = sorted((place[node] for node in going if last[node] == number), reverse=True)
        for position in leaving:
            del frontier[position]
        yield Step(len(entering), edges, tuple(leaving), not frontier and not waiting)


class Table(dict[int, int]):
    """The contraction of one list of edges in every partition that turns up, worked out when first asked for.

    It maps the number of a partition to twice the number of the partition that follows, plus 1 where the sign
    turns; -1 where an edge closes a loop or a block is cut off.
    """

    def __init__(self, catalogue: Catalogue, step: Step, choice: int, turning: bool) -> None:
        super().__init__()
        self._catalogue = catalogue
        self._step = step
        self._edges = step.edges[choice]
        self._turning = turning

    def __missing__(self, number: int) -> int:
        catalogue = self._catalogue
        partition = catalogue.partitions[number]
        found = contracted(partition, self._step, self._edges)
        code = -1
        if found is not None:
            sign = found[1] ^ (self._turning and blocks(partition) & 1)
            code = catalogue.number(found[0]) << 1 | sign
        self[number] = code
        return code


class Catalogue:
    """The partitions of a walk, numbered, and the tables between them."""

    def __init__(self) -> None:
        self.partitions: list[Partition] = []
        self._numbers: dict[Partition, int] = {}
        self._tables: dict[tuple[Step, int, bool], Table] = {}

    def number(self, partition: Partition) -> int:
        """Return the number of a partition."""
        found = self._numbers.get(partition)
        if found is None:
            found = self._numbers[partition] = len(self.partitions)
            self.partitions.append(partition)
        return found

    def table(self, step: Step, choice: int, turning: bool) -> Table:
        """Return the table of one choice; ``turning`` is for an edge without a partner."""
        key = step, choice, turning
        found = self._tables.get(key)
        if found is None:
            found = self._tables[key] = Table(self, step, choice, turning)
        return found


def blocks(partition: Partition) -> int:
    """Return the number of blocks.

    >>> blocks(bytes([0, 1, 0])), blocks(b"")
    (2, 0)
    """
    return max(partition) + 1 if partition else 0


def contracted(
    partition: Partition, step: Step, edges: tuple[Positions, ...]
) -> tuple[Partition, int] | None:
    """Let nodes enter, contract edges, let nodes leave.

    Args:
        partition: the frontier before.
        step: who enters and who leaves.
        edges: the edges of the choice that is taken.

    Returns:
        The frontier after, and 1 where the sign turns, else 0; None where a term with this choice is zero.

    The row of the block that disappears contributes (-1)^position and the edge's orientation; a block that is
    renumbered when its first node leaves contributes the parity of its move.

    >>> contracted(b"", Step(2, (((1, 0),),), (1,), False), ((1, 0),))
    (b'\\x00', 1)
    """
    sign = 0
    if step.entering:
        first = blocks(partition)
        partition += bytes(range(first, first + step.entering))
    for one, other in edges:
        tail, head = partition[one], partition[other]
        if tail == head:
            return None
        if tail < head:
            sign ^= 1 ^ head & 1
            partition = partition.translate(_joining(tail, head))
        else:
            sign ^= tail & 1
            partition = partition.translate(_joining(head, tail))
    for position in step.leaving:
        found = _left(partition, position, step.closing)
        if found is None:
            return None
        partition = found[0]
        sign ^= found[1]
    return partition, sign


def _left(partition: Partition, position: int, closing: bool) -> tuple[Partition, int] | None:
    """Let one node leave; None where its block is cut off from all that is to come."""
    label = partition[position]
    rest = partition[:position] + partition[position + 1 :]
    if label in partition[:position]:
        return rest, 0
    following = partition.find(label, position + 1)
    if following < 0:
        return (rest, 0) if closing and not rest else None
    last = max(partition[position:following])
    if last == label:
        return rest, 0
    return rest.translate(_moving(label, last)), (last - label) & 1


@cache
def _joining(kept: int, gone: int) -> bytes:
    """Return the renumbering after block ``gone`` has joined block ``kept``, the smaller one."""
    return bytes([*range(gone), kept, *range(gone, 255)])


@cache
def _moving(label: int, last: int) -> bytes:
    """Return the renumbering after block ``label`` has moved behind block ``last``."""
    return bytes([*range(label), last, *range(label, last), *range(last + 1, 256)])

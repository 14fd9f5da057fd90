"""The circuit as a graph, and what is applied to it for one ask."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import networkx as nx

from symcirc.complaints import Place
from symcirc.sheet.model import GROUND, Device, Part, Quantity


@dataclass(frozen=True)
class Circuit:
    """Nodes and parts. ``graph`` is the multigraph of everything that can carry current.

    An edge is one two-terminal part or one current-carrying branch of a device (an amplifier's output to ground,
    a primary, a secondary, ...); its key is the part's name, or (device's name, role).
    """

    parts: tuple[Part, ...]
    devices: tuple[Device, ...]
    graph: nx.MultiGraph
    node_labels: Mapping[str, str]
    node_places: Mapping[str, Place]
    ports: frozenset[str]


@dataclass(frozen=True)
class VoltageDrive:
    """An ideal voltage source, V_plus - V_minus = 1; its current is delivered into ``plus``."""

    plus: str
    minus: str

    @property
    def pair(self) -> tuple[str, str]:
        """The nodes between which the drive stands."""
        return self.plus, self.minus


@dataclass(frozen=True)
class CurrentDrive:
    """An ideal current source that delivers 1 into ``node`` from ground."""

    node: str

    @property
    def pair(self) -> tuple[str, str]:
        """The nodes between which the drive stands."""
        return self.node, GROUND


@dataclass(frozen=True)
class LoopDrive:
    """The named amplifier's output driven as by an ideal voltage source, V_drives = 1, its own law set aside."""

    amplifier: str
    node: str

    @property
    def pair(self) -> tuple[str, str]:
        """The nodes between which the drive stands."""
        return self.node, GROUND


Drive = VoltageDrive | CurrentDrive | LoopDrive


@dataclass(frozen=True)
class Setup:
    """One ask made ready: the live drive, the pairs of nodes that are shorted, and the ratio over / under.

    Nodes of ``shorts`` are (plus, minus); a short delivers its current into plus as a drive would.
    """

    ask: str
    drive: Drive
    shorts: tuple[tuple[str, str], ...]
    over: Quantity
    under: Quantity
    place: Place

"""From a circuit and an ask to numerator and denominator: the engine's front door."""

from __future__ import annotations

from dataclasses import dataclass

from symcirc.circuit.model import Circuit, Setup
from symcirc.trees.collect import collected
from symcirc.trees.diagram import Diagram, diagram
from symcirc.trees.expand import Polynomial, expanded, symbols
from symcirc.trees.graphs import two_graphs
from symcirc.trees.order import best_order
from symcirc.trees.relevance import relevant
from symcirc.trees.walk import walk


@dataclass(frozen=True)
class Answer:
    """A ratio of two polynomials in s whose coefficients are sums of products of symbols.

    Attributes:
        symbols: what the exponents count, in order.
        numerator: for every power of s a dict {exponents: coefficient} without zeros; [] for zero.
        denominator: likewise; [] where the circuit, or what is under the line, leaves the ratio undetermined.
        idle: the parts that do not matter to the ratio.
    """

    symbols: tuple[str, ...]
    numerator: Polynomial
    denominator: Polynomial
    idle: tuple[str, ...]


def ratio(circuit: Circuit, setup: Setup) -> Answer:
    """Return what is asked for, expanded.

    Args:
        circuit: its parts and devices; every symbol stands for a value of its own (ties are put in later).
        setup: one ask made ready.

    Returns:
        Numerator and denominator of over / under, sign included; a monomial that both share is left out.

    Raises:
        KeyError: an asked part is not in the circuit, or a device is of an unknown kind.
    """
    found = collected(determinants(circuit, setup))
    over, under = found.roots
    return Answer(symbols(found), expanded(found, over), expanded(found, under), found.idle)


def determinants(circuit: Circuit, setup: Setup, most_states: int | None = None) -> Diagram:
    """Return the decision diagram of numerator and denominator, products not yet collected.

    Args:
        circuit: its parts and devices.
        setup: one ask made ready.
        most_states: give up beyond so many states (some 2 microseconds and 300 bytes each); without it, never.

    Returns:
        What every question to the engine is read off: count it as it is, collect it (see
        :func:`symcirc.trees.collect.collected`) for everything that tells products apart.

    Raises:
        KeyError: an asked part is not in the circuit, or a device is of an unknown kind.
        TooManyStates: the diagram would be larger than ``most_states`` (see :mod:`symcirc.trees.frontier`).
    """
    graphs = relevant(two_graphs(circuit, setup))
    return diagram(walk(graphs, best_order(graphs), most_states), graphs.idle)

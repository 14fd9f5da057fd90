"""The circuit as a graph, what is applied to it for an ask, and the questions of its structure."""

from symcirc.circuit.build import build_circuit, build_setup
from symcirc.circuit.model import Circuit, Setup

__all__ = ["Circuit", "Setup", "build_circuit", "build_setup"]

"""Symbolic nodal equations of a circuit under one ask's drive."""

from symcirc.nodal.equations import System, build_system

__all__ = ["System", "build_system"]

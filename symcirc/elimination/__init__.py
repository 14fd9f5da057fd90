"""From the nodal equations to the asked ratio, the way a careful person does it."""

from symcirc.elimination.solve import solve

__all__ = ["solve"]

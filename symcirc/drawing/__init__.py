"""A sheet's circuit drawn: placed by a search, wired on a grid, written as SVG, and read back to prove it."""

from symcirc.drawing.draw import Drawn, draw, draw_svg

__all__ = ["Drawn", "draw", "draw_svg"]

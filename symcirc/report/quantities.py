"""Asked quantities as they are written in the sheet."""

from __future__ import annotations

from symcirc.sheet.model import GROUND, Ask, NodeCurrent, PartCurrent, Quantity, Voltage


def quantity_text(quantity: Quantity) -> str:
    """Return a quantity as the sheet writes it, a difference in brackets."""
    match quantity:
        case Voltage(plus=plus, minus=minus):
            return f"V_{plus}" if minus == GROUND else f"(V_{plus} - V_{minus})"
        case PartCurrent(part=name) | NodeCurrent(node=name):
            return f"I_{name}"


def ask_text(ask: Ask) -> str:
    """Return an ask as the sheet writes it."""
    if ask.over is None or ask.under is None:
        ratio = f"loop({ask.loop})"
    else:
        ratio = f"{quantity_text(ask.over)}/{quantity_text(ask.under)}"
    dead = ", ".join(f"{d.quantity}_{d.node} = 0" for d in ask.dead)
    driven = f" driven at {ask.driven_at}" if ask.driven_at else ""
    return f"{ask.name} = {ratio}" + (f" with {dead}" if dead else "") + driven

"""Printing is quick for the stages that are designed, and does not hang on larger ones."""

from __future__ import annotations

import time

from symcirc.transfer.latex import latex_function
from symcirc.transfer.layout import function_text
from symcirc.transfer.standard import coefficient_forms, monic_forms
from tests.transfer.samples import ladder


def seconds_to_print(sections: int) -> tuple[int, float]:
    low_pass = ladder(sections)
    started = time.process_time()
    for forms in (coefficient_forms(low_pass), monic_forms(low_pass)):
        function_text(forms, "H")
        latex_function(forms)
    return sum(map(len, low_pass.denominator)), time.process_time() - started


def test_six_hundred_products_are_printed_in_every_form_within_a_second() -> None:
    products, seconds = seconds_to_print(7)
    assert products == 610
    assert seconds < 1


def test_eleven_thousand_products_are_printed_in_every_form_within_twenty_seconds() -> None:
    products, seconds = seconds_to_print(10)
    assert products == 10946
    assert seconds < 20

"""Printing is quick for the stages that are designed, and does not hang on larger ones."""

from __future__ import annotations

import time

from symcirc.transfer.latex import latex_function
from symcirc.transfer.layout import function_text
from symcirc.transfer.standard import coefficient_forms, monic_forms
from tests.transfer.samples import ladder


def test_six_hundred_products_are_printed_in_every_form_at_once() -> None:
    low_pass = ladder(7)
    assert sum(map(len, low_pass.denominator)) == 610
    started = time.process_time()
    for forms in (coefficient_forms(low_pass), monic_forms(low_pass)):
        function_text(forms, "H")
        latex_function(forms)
    assert (
        time.process_time() - started < 2
    )  # 0.3 s on an idle core; several times that while coverage is traced


def test_eleven_thousand_products_are_printed_within_ten_seconds() -> None:
    low_pass = ladder(10)
    assert sum(map(len, low_pass.denominator)) == 10946
    started = time.process_time()
    function_text(coefficient_forms(low_pass), "H")
    assert time.process_time() - started < 10  # measured: 1 to 2 s

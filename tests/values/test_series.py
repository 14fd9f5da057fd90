"""The series against the values that IEC 60063 prints (from memory)."""

import itertools
from fractions import Fraction

import pytest

from symcirc.values.series import decade, values_between

E24 = "10 11 12 13 15 16 18 20 22 24 27 30 33 36 39 43 47 51 56 62 68 75 82 91"
E96 = """
    100 102 105 107 110 113 115 118 121 124 127 130 133 137 140 143 147 150 154 158 162 165 169 174
    178 182 187 191 196 200 205 210 215 221 226 232 237 243 249 255 261 267 274 280 287 294 301 309
    316 324 332 340 348 357 365 374 383 392 402 412 422 432 442 453 464 475 487 499 511 523 536 549
    562 576 590 604 619 634 649 665 681 698 715 732 750 768 787 806 825 845 866 887 909 931 953 976"""
E192 = """
    100 101 102 104 105 106 107 109 110 111 113 114 115 117 118 120 121 123 124 126 127 129 130 132
    133 135 137 138 140 142 143 145 147 149 150 152 154 156 158 160 162 164 165 167 169 172 174 176
    178 180 182 184 187 189 191 193 196 198 200 203 205 208 210 213 215 218 221 223 226 229 232 234
    237 240 243 246 249 252 255 258 261 264 267 271 274 277 280 284 287 291 294 298 301 305 309 312
    316 320 324 328 332 336 340 344 348 352 357 361 365 370 374 379 383 388 392 397 402 407 412 417
    422 427 432 437 442 448 453 459 464 470 475 481 487 493 499 505 511 517 523 530 536 542 549 556
    562 569 576 583 590 597 604 612 619 626 634 642 649 657 665 673 681 690 698 706 715 723 732 741
    750 759 768 777 787 796 806 816 825 835 845 856 866 876 887 898 909 920 931 942 953 965 976 988"""
PUBLISHED = {
    "E3": "10 22 47",
    "E6": "10 15 22 33 47 68",
    "E12": "10 12 15 18 22 27 33 39 47 56 68 82",
    "E24": E24,
    "E48": " ".join(E96.split()[::2]),
    "E96": E96,
    "E192": E192,
}


@pytest.mark.parametrize("series", PUBLISHED)
def test_a_series_has_the_published_values(series):
    words = PUBLISHED[series].split()
    expected = tuple(Fraction(int(word), 10 ** (len(word) - 1)) for word in words)
    assert len(expected) == int(series[1:])
    assert decade(series) == expected


def test_the_coarser_series_of_a_kind_are_in_the_finer_ones():
    for row in (("E3", "E6", "E12", "E24"), ("E48", "E96", "E192")):
        for coarse, fine in itertools.pairwise(row):
            assert set(decade(coarse)) <= set(decade(fine))


def test_a_range_spans_decades_and_holds_its_ends_exactly():
    values = values_between("E96", 1000, 1_000_000)
    assert len(values) == 3 * 96 + 1
    assert (values[0], values[-1]) == (1000, 1_000_000)
    small = values_between("E12", Fraction(1, 10**9), Fraction(1, 10**7))
    assert small[0] == Fraction(1, 10**9)
    assert Fraction(22, 10**10) in small
    assert len(small) == 25


def test_a_range_between_two_values_of_the_series_is_empty():
    assert values_between("E3", 230, 460) == ()

"""Reading what a tape, a scale or a person says, and saying it back."""

import math
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from shop.units import DIMENSIONS, ReadingError, parse_reading, show, unit_of


@pytest.mark.parametrize(
    ("typed", "unit", "dimension", "value", "read_unit"),
    [
        ("21 3/8", "in", "length", 21.375, "in"),
        ("21-3/8", "in", "length", 21.375, "in"),
        ("3/8", "in", "length", 0.375, "in"),
        ("8.5", "in", "length", 8.5, "in"),
        (".5", "in", "length", 0.5, "in"),
        ("542 mm", "in", "length", 542.0, "mm"),
        ('21 3/8"', "mm", "length", 21.375, "in"),
        ("3,200 lbs", "kg", "mass", 3200.0, "lb"),
        ("−4 1/2", "in", "length", -4.5, "in"),
        ("165 lb/in", "N/mm", "rate", 165.0, "lb/in"),
        ("85 f", "°C", "temperature", 85.0, "°F"),
        ("1.2 g", "m/s²", "acceleration", 1.2, "g"),
    ],
)
def test_what_people_type_is_read(typed, unit, dimension, value, read_unit):
    reading = parse_reading(typed, unit, dimension)
    assert reading.value == pytest.approx(value)
    assert reading.unit == read_unit


@pytest.mark.parametrize(
    ("typed", "words"),
    [
        ("", "not a number"), ("about 20", "not a number"), ("NaN", "finite"), ("inf", "finite"), ("1e400", "finite"),
        ("21 3/0", "divides by zero"), ("8,5", "decimal mark"), ("20 furlongs", "does not fit"), ("5 lb", "does not fit"),
        ("9" * 80, "too long"), ("--4", "not a number"), ("4 5", "does not fit|not a number"),
    ],
)
def test_what_cannot_be_read_is_said_in_words(typed, words):
    with pytest.raises(ReadingError, match=words):
        parse_reading(typed, "in", "length")


@given(st.integers(0, 400), st.integers(0, 63))
def test_every_fraction_on_a_tape_is_read_exactly(whole, sixtyfourths):
    part = Fraction(sixtyfourths, 64)
    text = f"{whole} {part.numerator}/{part.denominator}" if part else str(whole)
    assert parse_reading(text, "in", "length").value == float(whole + part)


@given(st.sampled_from(list(DIMENSIONS)), st.floats(1e-3, 1e5))
def test_a_value_comes_back_from_si(dimension, shown):
    for symbol in DIMENSIONS[dimension]:
        unit = unit_of(dimension, symbol)
        assert unit.from_si(unit.to_si(shown)) == pytest.approx(shown, rel=1e-9, abs=1e-9)


# Exact by definition: international yard and pound (1959), standard gravity (ISO 80000-3).
@pytest.mark.parametrize(
    ("dimension", "symbol", "si"),
    [
        ("length", "in", 0.0254), ("mass", "lb", 0.45359237), ("force", "lbf", 4.4482216152605),
        ("rate", "lb/in", 175.12683524647636), ("pressure", "psi", 6894.757293168361), ("speed", "mph", 0.44704),
        ("acceleration", "g", 9.80665), ("torque", "lbf·ft", 1.3558179483314004),
    ],
)
def test_factors_are_the_defined_ones(dimension, symbol, si):
    assert unit_of(dimension, symbol).to_si(1.0) == pytest.approx(si, rel=1e-12)


def test_freezing_is_32_fahrenheit():
    assert parse_reading("32", "°F", "temperature").si == pytest.approx(273.15)


def test_numbers_are_shown_with_their_unit_and_a_true_minus():
    assert show(-0.127, "length", "in") == "−5.000 in"
    assert show(14234.3, "force", "lbf") == "3,200 lbf"
    assert show(None, "force", "lbf") == "—"
    assert show(math.nan, "force", "lbf") == "—"
    assert show(-1e-9, "length", "in") == "0.000 in"

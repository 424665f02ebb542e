"""What a person types into the revision form, read in the unit that was typed."""

import pytest

from shop.setups.hit_lines import parse_hit_lines
from shop.setups.quantities import HIT_FORCE, quantity_of, read_setting
from shop.units import GRAVITY, POUND_FORCE, ReadingError


def test_the_peak_of_the_hit_goes_by_g_or_by_force_as_typed():
    assert read_setting("hit_peak", "1.2", "g").si == pytest.approx(1.2 * GRAVITY)
    assert read_setting("hit_peak", "3200", "lbf").si == pytest.approx(3200 * POUND_FORCE)
    by_force = read_setting("hit_peak", "3,200 lbf", "g")
    assert (by_force.unit, by_force.dimension) == ("lbf", "force")
    by_g = read_setting("hit_peak", "1.2 g", "N")
    assert (by_g.unit, by_g.dimension) == ("g", "acceleration")
    assert quantity_of("hit_peak", "lbf") is HIT_FORCE


@pytest.mark.parametrize(
    ("key", "typed", "unit", "words"),
    [
        ("hit_peak", "9", "g", "0.05 g to 6.00 g"),
        ("hit_peak", "2000000", "lbf", "outside 22 lbf to 33,721 lbf"),
        ("hit_peak", "3200 psi", "g", "psi"),
        ("rear_spring_rate", "-40", "lb/in", "outside 1.0 lb/in"),
        ("rear_spring_rate", "soft", "lb/in", "not a number"),
        ("rear_pressure", "1e9", "psi", "outside"),
        ("rear_pressure", "nan", "psi", "not a finite number"),
    ],
)
def test_what_cannot_be_set_is_refused_in_its_own_unit(key, typed, unit, words):
    with pytest.raises(ReadingError, match=words):
        read_setting(key, typed, unit)


def test_a_table_of_the_hit_is_read_line_by_line():
    table = parse_hit_lines("0 0\n0.04, 3,200\n\n120 ms; 14200 N", "lbf")
    assert table == [[0.0, 0.0], [0.04, pytest.approx(3200 * POUND_FORCE)], [pytest.approx(0.12), 14200.0]]


@pytest.mark.parametrize(
    ("typed", "words"),
    [
        ("0 0", "at least two lines"),
        ("0 0\n0.1 full", "line 2: “full” is not a number"),
        ("0 0\nlater 3200", "line 2: “later 3200” is not a time and a force"),
        ("0 0\n0.1 3200\n0.1 3300", "line 3: the time must be later"),
        ("0 0\n0.1 -5", "line 2: force -5 is outside 0 to"),
        ("0 0\n11 50", "line 2: time 11 is outside 0 to 10 s"),
        ("0 0\n0.1 1e9", "line 2: force 1e9 is outside"),
        ("0 0\n0.1 0", "every force is zero"),
        ("\n".join(f"{n / 100} 10" for n in range(300)), "300 lines; at most 200"),
    ],
)
def test_a_table_with_a_slip_names_the_line(typed, words):
    with pytest.raises(ReadingError, match=words):
        parse_hit_lines(typed, "lbf")

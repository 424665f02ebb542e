"""Load transfer and the traction limit against published values."""

import pytest

from solver.traction import (
    axle_loads,
    load_transfer,
    neutral_slopes,
    rear_spring_change,
    traction_limit,
)

INCH, POUND, LBF = 0.0254, 0.45359237, 4.4482216152605


def test_jazar_exercise_10():
    # h 0.72, l 2.62, mu 0.8, a1 = a2 [pub inputs]: 5.02978 m/s^2 [calc].
    limit = traction_limit(0.8, 1.31, 0.72, 2.62, gravity=9.81)
    assert limit.acceleration == pytest.approx(5.02978, abs=5e-6)
    assert not limit.wheels_lift


def test_jazar_exercise_12():
    # m 2058.9 kg, l 2750.8, h 760 mm, a 1.7, a1 = a2 [pub inputs]: 9131.88, 11 065.93 N [calc].
    loads = axle_loads(2058.9, 1.7, 1.3754, 0.760, 2.7508, gravity=9.81)
    assert loads.front == pytest.approx(9131.88, abs=5e-3)
    assert loads.rear == pytest.approx(11065.93, abs=5e-3)


def test_the_load_transfer_car():
    # 3000 lb, h 19.6 in, L 105 in, 1 g: 560 lbf [calc].
    moved = load_transfer(3000 * POUND, 9.80665, 19.6 * INCH, 105 * INCH)
    assert moved / LBF == pytest.approx(560.0)


def test_neutral_slopes_of_barton_and_fieldhouse():
    # eqs 3.63 to 3.69 [pub]: W 3000 lb, L 120, h 30 in, Kf 150, Kr 100 lb/in: 0.25, 0.416667 [calc].
    slopes = neutral_slopes(30 * INCH, 120 * INCH, 150.0, 100.0)
    assert slopes.no_squat == pytest.approx(0.25)
    assert slopes.no_pitch == pytest.approx(0.416667, abs=5e-7)
    change = rear_spring_change(3000 * POUND, 9.80665, 30 * INCH, 120 * INCH, slopes.no_squat)
    assert change == pytest.approx(0.0, abs=1e-9)


def test_no_pitch_slope_keeps_the_body_level():
    # Rear springs lengthen by as much as the front ones do: dFr/kr = dFf/kf.
    slope = neutral_slopes(0.5, 2.7, 43000.0, 52000.0).no_pitch
    rear = rear_spring_change(1300.0, 10.0, 0.5, 2.7, slope) / 52000.0
    front = -load_transfer(1300.0, 10.0, 0.5, 2.7) / 43000.0
    assert rear == pytest.approx(front)


def test_front_tyres_lift_before_the_rear_slip():
    limit = traction_limit(3.0, 1.2, 0.6, 2.7)
    assert limit.wheels_lift
    assert limit.acceleration == pytest.approx(9.80665 * 2.0)
    assert axle_loads(1000.0, limit.acceleration - 1e-9, 1.2, 0.6, 2.7).front == pytest.approx(0.0, abs=1e-5)
    # So much grip that the formula has no answer: the front always lifts.
    assert traction_limit(5.0, 1.2, 0.6, 2.7).wheels_lift


@pytest.mark.parametrize(
    ("call", "words"),
    [
        (lambda: traction_limit(0.0, 1.2, 0.6, 2.7), "grip is 0"),
        (lambda: traction_limit(1.0, 2.8, 0.6, 2.7), "behind the front axle"),
        (lambda: load_transfer(1300.0, 10.0, -0.5, 2.7), "CG height is -0.5 m"),
        (lambda: axle_loads(1000.0, 30.0, 1.2, 0.6, 2.7), "off the ground"),
        (lambda: neutral_slopes(0.5, 2.7, 0.0, 1.0), "front wheel rate"),
    ],
)
def test_bad_input_is_named(call, words):
    with pytest.raises(ValueError, match=words):
        call()

"""The field of hole choices against worked numbers and against the closed loop itself."""

import numpy as np
import pytest

from solver.hole_field import Masses, four_link_field, ladder_bar_field

INCH = 0.0254


def _through(x: float, z: float) -> tuple:
    """Four pins whose lines meet in (x, z), inches."""
    centre = np.array([x, z])
    housing = np.array([[0.5, 11.0], [1.0, 19.0]])
    chassis = housing + 0.4 * (centre - housing)
    return tuple(np.array([p]) * INCH for p in (chassis[0], housing[0], chassis[1], housing[1]))


# Independent derivation of the unsprung correction, evaluated separately [calc]:
# M 2700 lb sprung, m 300 lb at r 16 in, sprung CG 20 in (whole car 19.6), L 105 in.
MASSES = Masses(wheelbase=105 * INCH, cg_height=19.6 * INCH, mass=3000.0, rear_unsprung=300.0, axle_height=16 * INCH)


@pytest.mark.parametrize(
    ("x", "z", "dynamic", "trade"),
    [(50, 8, 94.2857, 85.7143), (60, 12, 110.7143, 107.1429), (40, 6.5, 99.7768, 87.0536)],
)
def test_anti_squat_of_worked_instant_centres(x, z, dynamic, trade):
    field = four_link_field(*_through(x, z), MASSES)
    assert field.ic_x[0] / INCH == pytest.approx(x)
    assert field.ic_z[0] / INCH == pytest.approx(z)
    assert field.anti_squat[0] == pytest.approx(trade, abs=1e-4)
    assert field.anti_squat_dynamic[0] == pytest.approx(dynamic, abs=1e-4)


def test_bar_example_instant_centre():
    # Lower bar (4,11) to (26,12.5), upper (2,22) to (22,20) in [calc, two ways].
    pins = [np.array([p]) * INCH for p in ([26, 12.5], [4, 11.0], [22, 20.0], [2, 22.0])]
    field = four_link_field(*pins, MASSES)
    assert field.ic_x[0] / INCH == pytest.approx(68.216216, abs=1e-6)
    assert field.ic_z[0] / INCH == pytest.approx(15.378378, abs=1e-6)


def test_parallel_links_keep_their_slope():
    pins = [np.array([p]) for p in ([0.5, 0.2], [0.0, 0.25], [0.5, 0.4], [0.0, 0.45])]
    field = four_link_field(*pins, MASSES)
    assert np.isnan(field.ic_x[0])
    assert field.slope[0] == pytest.approx(-0.1)
    assert np.isfinite(field.anti_squat_dynamic[0])


def test_a_parallelogram_does_not_turn_the_pinion():
    pins = [np.array([p]) for p in ([0.5, 0.2], [0.0, 0.25], [0.5, 0.4], [0.0, 0.45])]
    field = four_link_field(*pins, MASSES)
    assert field.pinion_bump[0] == pytest.approx(0.0, abs=1e-9)


def test_pinion_change_closes_the_loop_for_many_choices():
    random = np.random.default_rng(7)
    lanes = 200
    lc = np.column_stack([random.uniform(0.45, 0.6, lanes), random.uniform(0.18, 0.28, lanes)])
    uc = np.column_stack([random.uniform(0.4, 0.55, lanes), random.uniform(0.32, 0.42, lanes)])
    lh = np.column_stack([random.uniform(0.0, 0.03, lanes), random.uniform(0.24, 0.3, lanes)])
    uh = np.column_stack([random.uniform(0.0, 0.03, lanes), random.uniform(0.46, 0.54, lanes)])
    field = four_link_field(lc, lh, uc, uh, MASSES, travel=(0.04, -0.06))
    # First order: the housing turns about the instant centre, so d(angle) = travel / x_ic.
    small = four_link_field(lc, lh, uc, uh, MASSES, travel=(1e-5, -1e-5))
    assert np.allclose(small.pinion_bump, -1e-5 / field.ic_x, rtol=1e-3, atol=1e-9)
    assert np.isfinite(field.pinion_bump).all()


def test_a_linkage_that_locks_is_not_a_number():
    pins = [np.array([p]) for p in ([0.10, 0.25], [0.0, 0.26], [0.10, 0.45], [0.0, 0.46])]
    field = four_link_field(*pins, MASSES, travel=(0.5, -0.02))
    assert np.isnan(field.pinion_bump[0])
    assert np.isfinite(field.pinion_droop[0])


def test_crossing_bars_have_no_gap():
    pins = [np.array([p]) for p in ([0.5, 0.5], [0.0, 0.25], [0.5, 0.3], [0.0, 0.46])]
    assert four_link_field(*pins, MASSES).bar_gap[0] == 0.0


def test_ladder_bar_turns_about_its_pin():
    field = ladder_bar_field(np.array([[0.8, 0.25]]), MASSES, travel=(1e-5, -1e-5))
    assert field.ic_x[0] == 0.8
    assert field.pinion_bump[0] == pytest.approx(-1e-5 / 0.8, rel=1e-4)


def test_a_hole_without_a_position_is_refused():
    pins = [np.array([[0.5, np.nan]])] + [np.array([[0.5, 0.2]])] * 3
    with pytest.raises(ValueError, match="finite position"):
        four_link_field(*pins, MASSES)

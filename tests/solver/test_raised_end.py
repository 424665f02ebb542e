"""CG height by the raised-end method against the exact table."""

import math
from dataclasses import replace

import pytest

from solver.raised_end import LevelCar, centre_rise, cg_height, raised_angle
from solver.raised_steps import RaisedStep, fit_raised_steps

INCH, POUND = 0.0254, 0.45359237

# W 3200 lb, L 105 in, Wf 1440, Wr 1760, Rf 13, Rr 16, true h 19 in: angle (deg), Wf raised (lb),
# rise of the rear wheel centre (in), h by the weighted-radius short form (in) [calc].
TABLE = [
    (5.0, 1451.6276, 9.1399, 19.0109),
    (10.0, 1463.4943, 18.1875, 19.0220),
    (15.0, 1475.7965, 27.0738, 19.0336),
    (20.0, 1488.7591, 35.7312, 19.0457),
]


def car():
    return LevelCar(1440 * POUND, 1760 * POUND, 105 * INCH, 13 * INCH, 16 * INCH)


def mirrored():
    return LevelCar(1760 * POUND, 1440 * POUND, 105 * INCH, 16 * INCH, 13 * INCH)


@pytest.mark.parametrize(("degrees", "load", "rise", "short_form"), TABLE)
def test_height_from_the_angle(degrees, load, rise, short_form):
    result = cg_height(car(), "rear", load * POUND, math.radians(degrees))
    # The loads are printed to 1e-4 lb, which at 5 degrees is 4e-5 in of height.
    assert result.height / INCH == pytest.approx(19.0, abs=1e-4)
    assert result.load_moved / POUND == pytest.approx(load - 1440.0)
    assert abs(result.height / INCH - short_form) > 0.01


@pytest.mark.parametrize(("degrees", "load", "rise", "short_form"), TABLE)
def test_angle_from_the_rise(degrees, load, rise, short_form):
    angle = raised_angle(car(), "rear", rise * INCH)
    assert math.degrees(angle) == pytest.approx(degrees, abs=1e-4)
    assert cg_height(car(), "rear", load * POUND, angle).height / INCH == pytest.approx(19.0, abs=1e-3)


@pytest.mark.parametrize(("degrees", "load", "rise", "short_form"), TABLE)
def test_front_raised_is_the_mirror_image(degrees, load, rise, short_form):
    angle = raised_angle(mirrored(), "front", rise * INCH)
    assert math.degrees(angle) == pytest.approx(degrees, abs=1e-4)
    assert cg_height(mirrored(), "front", load * POUND, angle).height / INCH == pytest.approx(19.0, abs=1e-3)


def front_load(x, h, degrees_nose_up):
    """Front load (lb) of the table's car, by moments about the rear patch in the rotated frame."""
    pitch = math.radians(degrees_nose_up)

    def across(dx, dz):
        return dx * math.cos(pitch) - dz * math.sin(pitch)

    return 3200.0 * across(x, h - 16.0) / across(105.0, 13.0 - 16.0)


def test_front_raised_with_the_tables_own_car():
    load = 3200.0 - front_load(105 * 1440 / 3200, 19.0, 12.0)
    result = cg_height(car(), "front", load * POUND, math.radians(12.0))
    assert result.height / INCH == pytest.approx(19.0, abs=1e-9)


def test_squashed_tyres_change_the_rise_of_the_centres():
    rise = centre_rise(0.4, 0.33, 0.335, 0.41, 0.406)
    assert rise == pytest.approx(0.409)


def test_doubts_are_said():
    assert "5 degrees" in cg_height(car(), "rear", 1445 * POUND, math.radians(3.0)).doubts[0]
    assert "did not gain" in cg_height(car(), "rear", 1439 * POUND, math.radians(10.0)).doubts[0]
    assert cg_height(car(), "rear", 1463.4943 * POUND, math.radians(10.0)).doubts == ()
    assert "stands" in cg_height(car(), "rear", 1463 * POUND, math.radians(10.0)).caution


@pytest.mark.parametrize(
    ("call", "words"),
    [
        (lambda: cg_height(car(), "side", 660.0, 0.2), "raised end is 'side'"),
        (lambda: cg_height(car(), "rear", 660.0, 0.0), "angle in degrees is 0"),
        (lambda: cg_height(car(), "rear", 9000.0, 0.2), "standing axle's reading is 9000 kg"),
        (lambda: cg_height(car(), "rear", 560.0, 0.1), "below the ground"),
        (lambda: raised_angle(car(), "rear", 3.0), "rise of the wheel centre is 3 m"),
        (lambda: LevelCar(600.0, 700.0, 0.0, 0.3, 0.4), "wheelbase is 0 m"),
    ],
)
def test_bad_input_is_named(call, words):
    with pytest.raises(ValueError, match=words):
        call()


def steps(degrees, x=47.25, h=19.0, error=None):
    made = []
    for index, value in enumerate(degrees):
        load = front_load(x, h, value) + (error[index] if error else 0.0)
        way = "up" if index <= len(degrees) // 2 else "down"
        raised = "front" if value > 0 else "rear"
        made.append(RaisedStep(abs(math.radians(value)), raised, load * POUND, (3200 - load) * POUND, way))
    return made


CAR = {"mass": 3200 * POUND, "wheelbase": 105 * INCH, "front_radius": 13 * INCH, "rear_radius": 16 * INCH}


def test_fit_over_steps_is_exact_without_error():
    fitted = fit_raised_steps(steps([0, -5, -10, -15, -10, -5, 0]), **CAR)
    assert fitted.height / INCH == pytest.approx(19.0, abs=1e-9)
    assert fitted.x / INCH == pytest.approx(47.25, abs=1e-9)
    assert fitted.scatter == pytest.approx(0.0, abs=1e-9)
    assert fitted.doubts == ()


def test_fit_takes_both_ends_raised():
    fitted = fit_raised_steps(steps([8, 4, 0, -4, -8, -4, 0]), **CAR)
    assert fitted.height / INCH == pytest.approx(19.0, abs=1e-9)


def test_fit_recovers_scatter_and_up_down_difference():
    # 0.5 lb too little on the way up and too much on the way down: a friction-like pattern.
    error = [-0.5, -0.5, -0.5, -0.5, 0.5, 0.5, 0.5]
    fitted = fit_raised_steps(steps([0, -5, -10, -15, -10, -5, 0], error=error), **CAR)
    assert fitted.up_down / POUND == pytest.approx(1.0, abs=0.2)
    assert abs(fitted.height / INCH - 19.0) < 3 * fitted.height_uncertainty / INCH
    assert len(fitted.residuals) == 7
    assert sum(fitted.residuals) == pytest.approx(0.0, abs=1e-2)


def test_both_axles_are_averaged():
    # The front scale 1 kg too high and the rear as much: the car's mass says that they cancel.
    exact = steps([0, -5, -10])
    off = [replace(step, front=step.front + 1.0, rear=step.rear + 1.0) for step in exact]
    assert fit_raised_steps(off, **CAR).height == pytest.approx(fit_raised_steps(exact, **CAR).height)


def test_fit_uncertainty_agrees_with_linear_regression():
    # Equal radii make the exact form the plain straight line: compare scipy.stats.linregress [lib].
    from scipy.stats import linregress

    tangents = [0.0, 0.05, 0.1, 0.15, 0.2]
    loads = [600.0, 602.1, 603.8, 606.3, 607.9]
    made = [RaisedStep(math.atan(t), "rear", load) for t, load in zip(tangents, loads, strict=True)]
    fitted = fit_raised_steps(made, 1300.0, 2.7, 0.35, 0.35)
    line = linregress(tangents, loads)
    assert fitted.height == pytest.approx(0.35 + line.slope * 2.7 / 1300.0)
    assert fitted.height_uncertainty == pytest.approx(line.stderr * 2.7 / 1300.0)
    assert fitted.x_uncertainty == pytest.approx(line.intercept_stderr * 2.7 / 1300.0)


def test_fit_says_what_iso_10392_asks_for():
    fitted = fit_raised_steps(
        [RaisedStep(0.0, "rear", 600.0), RaisedStep(0.2, "rear", 608.0)], 1300.0, 2.7, 0.3, 0.4
    )
    assert len(fitted.doubts) == 3
    assert math.isnan(fitted.height_uncertainty)
    with pytest.raises(ValueError, match="all at one angle"):
        fit_raised_steps([RaisedStep(0.2, "rear", 608.0)], 1300.0, 2.7, 0.3, 0.4)
    with pytest.raises(ValueError, match="step 1 has no reading"):
        fit_raised_steps([RaisedStep(0.2, "rear")], 1300.0, 2.7, 0.3, 0.4)

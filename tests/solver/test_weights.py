"""Weights arithmetic against published and hand-worked values."""

import pytest

from solver.inertia import Component, pitch_inertia, typical_pitch_inertia
from solver.weights import Corners, axle_weights, cg_from_scales, sprung_mass, weigh

INCH, POUND = 0.0254, 0.45359237


def test_axle_loads_of_jazars_car():
    # Jazar, Vehicle Dynamics, exercise: m 1765 kg, l 2.84, a1 1.22, a2 1.62 m [pub inputs];
    # loads at g 9.81 [calc], whose last figure was cut, not rounded.
    axles = axle_weights(1765.0, 1.62, 2.84)
    assert axles.front * 9.81 == pytest.approx(9876.6, abs=0.1)
    assert axles.rear * 9.81 == pytest.approx(7437.9, abs=0.1)


def test_percentages_and_cross_weight():
    # [calc] by hand; cross weight is right front plus left rear (common practice, no source).
    weighing = weigh(Corners(350.0, 330.0, 310.0, 290.0))
    assert weighing.total == 1280.0
    assert weighing.front_percent == pytest.approx(53.125)
    assert weighing.left_percent == pytest.approx(51.5625)
    assert weighing.cross_weight == 640.0
    assert weighing.cross_percent == pytest.approx(50.0)
    assert weighing.rear_percent + weighing.front_percent == pytest.approx(100.0)


def test_cg_from_scales_takes_moments_with_each_track():
    corners = Corners(350.0, 330.0, 310.0, 290.0)
    cg = cg_from_scales(corners, wheelbase=2.7, front_track=1.5, rear_track=1.3)
    assert cg.x == pytest.approx(2.7 * 680 / 1280)
    assert cg.x + cg.behind_front_axle == pytest.approx(2.7)
    assert cg.y == pytest.approx((0.75 * 20 + 0.65 * 20) / 1280)


def test_cg_agrees_with_axle_weights_there_and_back():
    corners = Corners(350.0, 330.0, 310.0, 290.0)
    cg = cg_from_scales(corners, 2.7, 1.5, 1.3)
    axles = axle_weights(1280.0, cg.x, 2.7)
    assert axles.front == pytest.approx(680.0)
    assert axles.rear == pytest.approx(600.0)


def test_sprung_mass_of_the_load_transfer_car():
    # M 2700 lb at hs 20 in, m 300 lb at r 16, whole car h 19.6 in (published-value set, section 2).
    sprung = sprung_mass(
        3000 * POUND, 50 * INCH, 19.6 * INCH, 105 * INCH, 0.0, 300 * POUND, 13 * INCH, 16 * INCH
    )
    assert sprung.mass / POUND == pytest.approx(2700.0)
    assert sprung.z / INCH == pytest.approx(20.0)
    assert sprung.x / INCH == pytest.approx(3000 * 50 / 2700)


def test_sprung_mass_adds_back_to_the_whole_car():
    sprung = sprung_mass(1300.0, 1.4, 0.52, 2.7, 70.0, 160.0, 0.33, 0.41)
    assert sprung.mass * sprung.x + 70.0 * 2.7 == pytest.approx(1300.0 * 1.4)
    assert sprung.mass * sprung.z + 70.0 * 0.33 + 160.0 * 0.41 == pytest.approx(1300.0 * 0.52)


def test_a_car_lighter_than_its_axles_is_refused():
    with pytest.raises(ValueError, match="heavier than its axles"):
        sprung_mass(200.0, 1.4, 0.52, 2.7, 70.0, 160.0, 0.33, 0.41)


@pytest.mark.parametrize(
    ("corners", "words"),
    [
        (Corners(-1.0, 1.0, 1.0, 1.0), "front left scale reading is -1 kg"),
        (Corners(0.0, 0.0, 0.0, 0.0), "total of the four scale readings"),
        (Corners(1.0, float("nan"), 1.0, 1.0), "front right scale reading is nan"),
    ],
)
def test_bad_readings_are_named(corners, words):
    with pytest.raises(ValueError, match=words):
        weigh(corners)


def test_pitch_inertia_of_a_cut_block_is_that_of_the_whole():
    # m (l^2 + h^2)/12 of a uniform block must not depend on how it is cut [calc].
    whole = pitch_inertia([Component("body", 900.0, 1.2, 0.5, 4.0, 0.6)])
    halves = pitch_inertia(
        [
            Component("rear half", 450.0, 0.2, 0.5, 2.0, 0.6),
            Component("front half", 450.0, 2.2, 0.5, 2.0, 0.6),
        ]
    )
    assert whole.inertia == pytest.approx(900.0 * (16.0 + 0.36) / 12.0)
    assert halves.inertia == pytest.approx(whole.inertia)
    assert (halves.x, halves.z, halves.mass) == pytest.approx((1.2, 0.5, 900.0))
    assert sum(share.total for share in halves.shares) == pytest.approx(halves.inertia)


def test_known_own_inertia_replaces_the_block():
    parts = [
        Component("engine", 200.0, 2.0, 0.5, 0.7, 0.6, own_inertia=11.0),
        Component("ballast", 1.0, 2.0, 0.5),
    ]
    assert pitch_inertia(parts).inertia == pytest.approx(11.0)


def test_typical_inertia_is_marked_as_such():
    typical = typical_pitch_inertia(1000.0, 1.5, 2.7)
    assert typical.inertia == pytest.approx(0.9 * 1000.0 * 1.5 * 1.2)
    assert typical.spread > 0.0
    assert "not measured" in typical.source
    with pytest.raises(ValueError, match="between the axles"):
        typical_pitch_inertia(1000.0, 3.0, 2.7)


def test_empty_list_and_weightless_component_are_refused():
    with pytest.raises(ValueError, match="list of components is empty"):
        pitch_inertia([])
    with pytest.raises(ValueError, match="mass of battery"):
        pitch_inertia([Component("battery", 0.0, 0.0, 0.3)])

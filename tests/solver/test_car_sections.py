"""The car file's optional sections: what is read, and what is refused in which words."""

import copy

import pytest

from solver.bar_section import read_bars
from solver.car import FourLink, LadderBar, Link
from solver.corner_section import read_corners
from solver.loads import link_length, with_lengths
from solver.reading import Section

CORNERS = {
    "measured": {"front_left": 352.0, "front_right": 331.0, "rear_left": 305.0, "rear_right": 298.0},
    "target_cross_percent": 50.0,
    "front": {"track": 1.52, "spring_rates": [40000.0, 42000.0], "motion_ratio": 0.7, "thread_pitch": 0.0015},
    "rear": {
        "track": 1.40,
        "spring_rates": [30000.0, 30000.0],
        "motion_ratio": 0.95,
        "thread_pitch": 0.0016,
        "tyre_rate": 210000.0,
        "spring_base": 1.0,
    },
    "raised": [{"raised": "rear", "angle": 0.1745, "front": 692.0}],
    "driveshaft": {"final_drive": 4.1},
}
BARS = {
    "lower": {
        "outside_diameter": 0.03175,
        "wall": 0.0024,
        "material": "4130 normalised",
        "threads": [{"diameter": 0.01905, "pitch": 0.0015875, "proof_strength": 690e6}],
        "rod_ends": [{"name": "chassis end", "radial_rating": 120e3, "rating_source": "maker's sheet"}],
    },
    "upper": {
        "length": 0.45,
        "outside_diameter": 0.0254,
        "wall": 0.003,
        "material": {"name": "tube as bought", "modulus": 200e9, "yield_strength": 400e6},
        "count": 1,
    },
    "allowances": {"dynamic": 2.0, "fatigue": 0.4, "source": "the shop's own"},
}
LINKAGE = FourLink(Link((0.56, 0.22), (0.01, 0.26)), Link((0.46, 0.35), (0.02, 0.48), plan_angle=0.3))


def corners(content):
    """The plan read, and the faults by place."""
    faults = []
    plan = read_corners(Section(content, "corners", faults))
    return plan, {fault.field: str(fault) for fault in faults}


def bars(content, linkage=LINKAGE):
    faults = []
    plan = read_bars(Section(content, "bars", faults), linkage)
    return plan, {fault.field: str(fault) for fault in faults}


def altered(section, path, value):
    changed = copy.deepcopy(section)
    *way, last = path
    place = changed
    for step in way:
        place = place[step]
    if value is KeyError:
        del place[last]
    else:
        place[last] = value
    return changed


def test_corners_as_written():
    plan, faults = corners(CORNERS)
    assert faults == {}
    assert plan.measured.front_left == 352.0
    assert plan.front.tyre_rate is None and plan.rear.tyre_rate == 210000.0
    assert plan.front.spring_rates == (40000.0, 42000.0)
    assert plan.rear.spring_base == 1.0 and plan.front.spring_base is None
    assert plan.raised[0].rear is None and plan.raised[0].way == "up"
    assert plan.driveshaft.rotation == "standard"
    assert plan.keep_height is True


def test_scales_alone_are_enough():
    content = {"measured": CORNERS["measured"], "front": {"track": 1.5}, "rear": {"track": 1.4}}
    plan, faults = corners(content)
    assert faults == {}
    assert plan.front.spring_rates is None and not plan.has_target and plan.raised == ()


def test_nulls_are_as_absent():
    nothing = {"target": None, "raised": None, "driveshaft": None}
    plan, faults = corners({**altered(CORNERS, ["target_cross_percent"], None), **nothing})
    assert faults == {}
    assert plan.target_cross_percent is None and plan.driveshaft is None


@pytest.mark.parametrize(
    ("path", "value", "where", "words"),
    [
        (["measured", "rear_left"], KeyError, "corners.measured.rear_left", "is missing"),
        (["measured", "rear_left"], -3, "corners.measured.rear_left", "= -3: must be a number from 0"),
        (["measured", "rear_left"], "300", "corners.measured.rear_left", "must be a number"),
        (["measured"], [1, 2, 3, 4], "corners.measured", "must be an object"),
        (["front", "motion_ratio"], 0, "corners.front.motion_ratio", "from 0.05"),
        (["front", "spring_rates"], [1.0], "corners.front.spring_rates", "[left, right]"),
        (["front", "spring_rates"], [1.0, 40000.0], "corners.front.spring_rates.0", "N/m"),
        (["front", "spring_rates"], KeyError, "corners.front.spring_rates", "spring seats cannot"),
        (["front", "thread_pitch"], KeyError, "corners.front.thread_pitch", "adjustable as false"),
        (["rear", "colour"], "red", "corners.rear.colour", "not in the format"),
        (["raised", 0, "raised"], "side", "corners.raised.0.raised", "front, rear"),
        (["raised", 0, "angle"], 10, "corners.raised.0.angle", "rad"),
        (["raised", 0, "front"], KeyError, "corners.raised.0", "has no reading"),
        (["raised"], {}, "corners.raised", "must be a list"),
        (["target_cross_percent"], 120, "corners.target_cross_percent", "from 0 to 100"),
        (["target"], CORNERS["measured"], "corners.target_cross_percent", "one of the two"),
        (["keep_height"], "yes", "corners.keep_height", "true or false"),
        (["front", "adjustable"], False, "corners.keep_height", "all four corners"),
        (["driveshaft", "final_drive"], 0, "corners.driveshaft.final_drive", "from 0.5"),
        (["typo"], 1, "corners.typo", "not in the format"),
    ],
)
def test_corner_faults_name_their_place(path, value, where, words):
    assert words in corners(altered(CORNERS, path, value))[1][where]


def test_every_fault_is_told_at_once():
    assert len(corners({"measured": {"front_left": "x"}, "front": 3, "typo": 1})[1]) >= 6


def test_bars_as_written():
    plan, faults = bars(BARS)
    assert faults == {}
    assert plan.lower.length is None and plan.upper.length == 0.45
    assert plan.lower.material.yield_strength == pytest.approx(517.1e6)
    assert plan.lower.rod_ends[0].radial_rating == 120e3
    assert (plan.lower.count, plan.upper.count) == (2, 1)
    assert plan.allowances.dynamic == 2.0


def test_lengths_follow_from_the_pins():
    described = with_lengths(bars(BARS)[0], LINKAGE)
    assert described["lower"].length == pytest.approx((0.55**2 + 0.04**2) ** 0.5)
    assert described["upper"].length == 0.45
    # A bar that runs inward by the plan angle is longer than its side view.
    assert link_length(LINKAGE.upper) == pytest.approx((0.44**2 + 0.13**2) ** 0.5 / 0.955336, rel=1e-6)


def test_default_allowances_say_that_they_have_no_source():
    plan, faults = bars(altered(BARS, ["allowances"], KeyError))
    assert faults == {}
    assert "no source" in plan.allowances.source


@pytest.mark.parametrize(
    ("path", "value", "where", "words"),
    [
        (["lower", "wall"], 0.02, "bars.lower.wall", "half the outside diameter"),
        (["lower", "wall"], KeyError, "bars.lower.wall", "is missing"),
        (["lower", "material"], "wood", "bars.lower.material", "4130 normalised"),
        (["lower", "material"], 5, "bars.lower.material", "must be an object"),
        (["upper", "material", "modulus"], -1, "bars.upper.material.modulus", "Pa"),
        (["lower", "threads", 0, "pitch"], 0.0095, "bars.lower.threads.0.pitch", "too coarse"),
        (["lower", "threads", 0, "form"], "pipe", "bars.lower.threads.0.form", "unified, metric"),
        (
            ["lower", "rod_ends", 0, "rating_source"],
            KeyError,
            "bars.lower.rod_ends.0.rating_source",
            "missing",
        ),
        (["lower", "fixity"], 9, "bars.lower.fixity", "from 0.25 to 4"),
        (["upper", "count"], 0, "bars.upper.count", "from 1 to 4"),
        (["upper", "count"], 1.5, "bars.upper.count", "whole number"),
        (["allowances", "dynamic"], 0.5, "bars.allowances.dynamic", "from 1 to 10"),
        (["panhard"], {}, "bars.panhard", "not in the format"),
    ],
)
def test_bar_faults_name_their_place(path, value, where, words):
    assert words in bars(altered(BARS, path, value))[1][where]


def test_ladder_bars_are_not_covered():
    assert "qualified fabricator" in bars(BARS, LadderBar((1.0, 0.2)))[1]["bars"]


def test_empty_bars_section():
    assert "describes no bar" in bars({})[1]["bars"]

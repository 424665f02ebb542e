"""Which choices a study looks at, and what it says to a plan that asks too much or nothing."""

import itertools

import pytest

from shop.refusals import Refused
from shop.studies.plan import MOST_CHOICES, Axis, Plan, read_plan

HOLES = Axis("lower_chassis", (1, 2, 3)), Axis("upper_chassis", (1, 2)), Axis("rear_spring_rate", (2e4, 3e4))


def test_every_combination_is_numbered_once():
    plan = Plan("every", HOLES)
    expected = [dict(zip([axis.key for axis in HOLES], values, strict=True))
                for values in itertools.product(*(axis.values for axis in HOLES))]
    assert list(plan.between(0, len(plan))) == expected
    assert list(plan.between(5, 8)) == expected[5:8]


def test_one_at_a_time_starts_from_what_is_on_the_car():
    plan = Plan("one", HOLES, base={"lower_chassis": 2, "upper_chassis": 1, "rear_spring_rate": 2e4})
    choices = list(plan.between(0, len(plan)))
    assert choices[0] == plan.base
    assert len(choices) == 1 + 2 + 1 + 1
    for choice in choices[1:]:
        assert sum(choice[key] != plan.base[key] for key in plan.base) == 1


@pytest.mark.parametrize("changes", [1, 2, 3])
def test_few_changes_are_all_choices_that_differ_in_no_more_and_the_fewest_come_first(changes):
    base = {"lower_chassis": 2, "upper_chassis": 1, "rear_spring_rate": 2e4}
    plan = Plan("few", HOLES, base=base, size=changes)
    choices = list(plan.between(0, len(plan)))
    differing = [sum(choice[key] != base[key] for key in base) for choice in choices]
    every = [dict(zip(base, values, strict=True)) for values in itertools.product(*(axis.values for axis in HOLES))]
    expected = [choice for choice in every if sum(choice[key] != base[key] for key in base) <= changes]
    assert len(choices) == len(expected)
    assert all(choice in choices for choice in expected)
    assert differing == sorted(differing)


def test_a_sample_can_be_drawn_again_and_spreads_over_every_value():
    plan = Plan("sample", HOLES, size=64, seed=9)
    first, again = list(plan.between(0, 64)), list(plan.between(0, 64))
    assert first == again
    assert list(Plan("sample", HOLES, size=64, seed=10).between(0, 64)) != first
    for axis in HOLES:
        assert {choice[axis.key] for choice in first} == set(axis.values)


def test_a_plan_survives_being_stored():
    plan = Plan("one", HOLES, base={"lower_chassis": 2})
    assert read_plan(plan.to_dict()) == plan


@pytest.mark.parametrize(
    ("data", "words"),
    [
        ({"axes": []}, "nothing is varied"),
        ({"axes": [{"key": "lower_chassis", "values": [2]}]}, "nothing is varied"),
        ({"mode": "guess", "axes": []}, "not a way to combine"),
        ({"axes": [{"key": "moon_phase", "values": [1, 2]}]}, "not something a study can vary"),
        ({"axes": [{"key": "rear_spring_rate", "values": [1, float("nan")]}]}, "finite"),
        ({"axes": [{"key": "rear_spring_rate", "values": ["soft", 2]}]}, "numbers"),
        ({"mode": "sample", "size": 1, "axes": [{"key": "lower_chassis", "values": [1, 2]}]}, "a sample has 2"),
        ({"axes": [{"key": "lower_chassis", "values": [1, 2]}] * 2}, "varied twice"),
    ],
)
def test_a_plan_that_cannot_be_run_is_refused_in_words(data, words):
    with pytest.raises(Refused, match=words):
        read_plan(data)


def test_a_billion_combinations_are_refused_with_the_count_and_a_way_out():
    axes = [{"key": key, "values": list(range(1, 33))}
            for key in ("lower_chassis", "lower_housing", "upper_chassis", "upper_housing")]
    axes += [{"key": "rear_spring_rate", "values": [float(rate) for rate in range(20000, 21000)][:100]},
             {"key": "front_spring_rate", "values": [1e4, 2e4, 3e4, 4e4, 5e4, 6e4, 7e4, 8e4, 9e4, 1e5]}]
    with pytest.raises(Refused) as refusal:
        read_plan({"axes": axes})
    assert "1,048,576,000 combinations" in str(refusal.value)
    assert f"{MOST_CHOICES:,}" in str(refusal.value)
    assert "Narrow it" in str(refusal.value)

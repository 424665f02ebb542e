"""The side view and the small charts: what is drawn, where, and that it is a drawing a page may carry."""

from __future__ import annotations

import dataclasses
import math
import xml.etree.ElementTree as ElementTree

import pytest

from shop.drawing.canvas import Canvas
from shop.drawing.chart_svg import Curve, Mark, line_chart
from shop.drawing.scene import Scene, Strut
from shop.drawing.side_view import side_view

SVG = "{http://www.w3.org/2000/svg}"
LOWEST = {
    "lower_chassis": (0.90, 0.15),
    "lower_housing": (0.05, 0.18),
    "upper_chassis": (0.52, 0.38),
    "upper_housing": (0.03, 0.53),
}


def scene(**changes) -> Scene:
    """A four-link with five holes a bracket, an inch apart upwards."""
    brackets = {place: tuple((x, z + 0.0254 * n) for n in range(5)) for place, (x, z) in LOWEST.items()}
    whole = Scene(
        wheelbase=2.75,
        front_radius=0.33,
        rear_radius=0.41,
        cg=(1.25, 0.58),
        cg_provisional=False,
        brackets=brackets,
        chosen={"lower_chassis": 2, "lower_housing": 1, "upper_chassis": 3, "upper_housing": 4},
        centre=(1.40, 0.17),
        slope=0.17 / 1.40,
        length=lambda metres: f"{metres / 0.0254:.2f} in",
        struts=(Strut((0.06, 0.70), (-0.04, 0.24), "spring and shock"),),
        title="Car <7> & \"rev 3\"",
    )
    return dataclasses.replace(whole, **changes)


def drawn(text: str) -> list[ElementTree.Element]:
    return list(ElementTree.fromstring(f'<page xmlns="http://www.w3.org/2000/svg">{text}</page>'))  # noqa: S314  our own text


def of_class(svg: ElementTree.Element, name: str) -> list[ElementTree.Element]:
    return [one for one in svg.iter() if name in one.get("class", "").split()]


def only(svg: ElementTree.Element, name: str) -> ElementTree.Element:
    found = of_class(svg, name)
    assert len(found) == 1, f"{len(found)} of class {name}"
    return found[0]


def words(svg: ElementTree.Element) -> str:
    return " | ".join("".join(text.itertext()) for text in svg.iter(f"{SVG}text"))


def link_lines(svg: ElementTree.Element, css: str = "link") -> list[ElementTree.Element]:
    return [line for line in of_class(svg, css) if line.tag == f"{SVG}line"]


def numbers(mark: ElementTree.Element, *names: str) -> list[float]:
    return [float(mark.get(name)) for name in names]


def scale_and_origin(svg: ElementTree.Element, of: Scene) -> tuple[float, float, float]:
    """Units a metre, and where the origin of the plane is, read off the two axle centres and the ground."""
    rear, front = sorted((numbers(tyre, "cx", "cy", "r") for tyre in of_class(svg, "tyre")), key=lambda one: one[0])
    ground = numbers(only(svg, "ground"), "y1")[0]
    return (front[0] - rear[0]) / of.wheelbase, rear[0], ground


def test_everything_is_drawn_to_one_scale() -> None:
    car = scene()
    whole = drawn(side_view(car, mode="paper"))[0]
    scale, x0, ground = scale_and_origin(whole, car)
    tyres = sorted((numbers(tyre, "cx", "cy", "r") for tyre in of_class(whole, "tyre")), key=lambda one: one[0])
    for (x, y, radius), (at, metres) in zip(tyres, ((0, car.rear_radius), (car.wheelbase, car.front_radius)), strict=True):
        assert radius == pytest.approx(metres * scale, abs=0.2)
        assert (x, y) == pytest.approx((x0 + at * scale, ground - metres * scale), abs=0.2)
    lower, _ = link_lines(whole)
    chassis, housing = car.brackets["lower_chassis"][1], car.brackets["lower_housing"][0]
    assert numbers(lower, "x1", "y1") == pytest.approx([x0 + chassis[0] * scale, ground - chassis[1] * scale], abs=0.2)
    assert numbers(lower, "x2", "y2") == pytest.approx([x0 + housing[0] * scale, ground - housing[1] * scale], abs=0.2)


def test_forward_is_right_and_up_is_up() -> None:
    canvas = Canvas(-1.0, 3.0, -0.5, 1.5)
    assert canvas.at((-1.0, 1.5)) == (0.0, 0.0)
    assert canvas.at((3.0, -0.5)) == (canvas.width, canvas.height)


def test_neutral_line_runs_from_the_rear_patch_through_the_cg_height_above_the_front_axle() -> None:
    car = scene()
    whole = drawn(side_view(car, mode="paper"))[0]
    scale, x0, ground = scale_and_origin(whole, car)
    x1, y1, x2, y2 = numbers(only(whole, "neutral-line"), "x1", "y1", "x2", "y2")
    assert (x1, y1) == pytest.approx((x0, ground), abs=0.1)
    assert (y1 - y2) / (x2 - x1) == pytest.approx(car.cg[1] / car.wheelbase, rel=1e-3)
    assert x2 - x0 > car.wheelbase * scale  # and on past the front axle


def test_force_line_goes_through_the_instant_centre() -> None:
    car = scene()
    whole = drawn(side_view(car, mode="paper"))[0]
    scale, x0, ground = scale_and_origin(whole, car)
    circle = next(only(whole, "centre").iter(f"{SVG}circle"))
    x, y = numbers(circle, "cx", "cy")
    assert (x, y) == pytest.approx((x0 + 1.40 * scale, ground - 0.17 * scale), abs=0.2)
    x1, y1, x2, y2 = numbers(only(whole, "force-line"), "x1", "y1", "x2", "y2")
    assert (y1 - y2) / (x2 - x1) == pytest.approx((ground - y) / (x - x0), abs=1e-3)
    assert "instant centre 55.12 in ahead, 6.69 in up" in words(whole)


def test_parallel_links_have_a_force_line_along_their_slope_and_no_instant_centre() -> None:
    whole = drawn(side_view(scene(centre=None, slope=0.05), mode="paper"))[0]
    assert of_class(whole, "centre") == [] and of_class(whole, "drawn-out") == []
    x1, y1, x2, y2 = numbers(only(whole, "force-line"), "x1", "y1", "x2", "y2")
    assert (y1 - y2) / (x2 - x1) == pytest.approx(0.05, abs=1e-3)
    assert "no instant centre" in words(whole)


@pytest.mark.parametrize(
    ("centre", "turn", "said"),
    [
        ((40.0, 2.0), math.degrees(math.atan2(-2.0, 40.0)), "1574.80 in ahead, 78.74 in up"),
        ((-9.0, -1.5), math.degrees(math.atan2(1.5, -9.0)), "354.33 in behind, 59.06 in below ground"),
    ],
)
def test_an_instant_centre_out_of_sight_is_an_arrow_towards_it_with_its_distance(centre, turn, said) -> None:
    whole = drawn(side_view(scene(centre=centre, slope=centre[1] / centre[0]), mode="paper"))[0]
    arrow = only(whole, "away")
    assert float(arrow.get("transform").split("rotate(")[1].rstrip(")")) == pytest.approx(turn, abs=0.1)
    assert said in words(whole)


def test_the_chosen_hole_of_each_bracket_is_marked_and_only_it() -> None:
    car = scene()
    rear = drawn(side_view(car, mode="choose"))[0]
    picks = of_class(rear, "pick")
    assert len(picks) == 20
    pressed = {pick.get("data-bracket"): int(pick.get("data-hole")) for pick in picks if pick.get("aria-pressed") == "true"}
    assert pressed == dict(car.chosen)
    assert len(of_class(rear, "chosen")) == 4
    third = next(one for one in picks if one.get("data-bracket") == "upper_chassis" and one.get("data-hole") == "3")
    assert third.get("aria-label") == "Upper link, chassis bracket, hole 3, chosen"
    assert (third.get("role"), third.get("tabindex")) == ("button", "0")


def test_holes_are_buttons_only_where_one_chooses() -> None:
    for mode in ("read", "paper"):
        for svg in drawn(side_view(scene(), mode=mode)):
            assert of_class(svg, "pick") == [] and "tabindex" not in ElementTree.tostring(svg, encoding="unicode")


def test_a_hole_the_bracket_does_not_have_leaves_its_link_out() -> None:
    whole = drawn(side_view(scene(chosen={**scene().chosen, "lower_chassis": 9}), mode="paper"))[0]
    assert len(link_lines(whole)) == 1


def test_a_hole_below_the_ground_is_drawn_below_the_ground() -> None:
    sunk = {**scene().brackets, "lower_chassis": tuple((0.9, -0.4 + 0.05 * n) for n in range(5))}
    car = scene(brackets=sunk)
    for svg in drawn(side_view(car)):
        ground = numbers(only(svg, "ground"), "y1")[0]
        height = float(svg.get("viewBox").split()[3])
        low = max(numbers(hole, "cy")[0] for hole in of_class(svg, "hole"))
        assert ground < low < height


def test_a_typical_cg_height_is_marked_in_shape_and_words() -> None:
    measured, typical = (drawn(side_view(scene(cg_provisional=is_typical), mode="paper"))[0] for is_typical in (False, True))
    assert of_class(measured, "provisional") == [] and "typical" not in words(measured)
    assert len(of_class(typical, "provisional")) == 1 and "CG 22.83 in up, typical" in words(typical)


def test_another_setup_is_drawn_behind_and_named() -> None:
    other = scene(chosen={**scene().chosen, "upper_chassis": 1}, title="rev 2")
    whole = drawn(side_view(scene(ghost=other), mode="paper"))[0]
    ghosts = link_lines(whole, "ghost")
    assert len(ghosts) == 2 and "dashed: rev 2" in words(whole)
    order = list(whole)
    assert max(map(order.index, ghosts)) < min(order.index(line) for line in link_lines(whole) if line not in ghosts)


def test_labels_do_not_cover_each_other() -> None:
    canvas = Canvas(0.0, 4.0, 0.0, 1.5)
    for z in (0.70, 0.71, 0.72, 0.70):
        canvas.label((2.0, z), "a label of some length")
    for n, one in enumerate(canvas.taken):
        for other in canvas.taken[n + 1 :]:
            assert one[2] <= other[0] or other[2] <= one[0] or one[3] <= other[1] or other[3] <= one[1]


def test_a_ladder_bar_is_one_bar_from_its_hole_to_the_axle() -> None:
    holes = {"ladder_chassis": ((0.80, 0.20), (0.80, 0.23))}
    car = scene(brackets=holes, chosen={"ladder_chassis": 2}, centre=(0.80, 0.23), slope=0.23 / 0.80)
    whole = drawn(side_view(car, mode="paper"))[0]
    scale, x0, ground = scale_and_origin(whole, car)
    (bar,) = link_lines(whole)
    assert numbers(bar, "x2", "y2") == pytest.approx([x0, ground - car.rear_radius * scale], abs=0.2)


def path_of(chart: ElementTree.Element, number: int) -> str:
    """The one drawn curve of that number, its key beside the name left aside."""
    (path,) = [one.get("d") for one in of_class(chart, f"curve-{number}") if one not in of_class(chart, "key")]
    return path


CURVES = (Curve("rev 3", (1400.0, 2100.0, 1800.0)), Curve("rev 2", (1400.0, None, 1700.0)))


def test_a_small_chart_has_its_units_its_curves_and_its_marks() -> None:
    lift = Mark(0.25, "front tyres lift")
    (chart,) = drawn(line_chart("Rear tyres", "lbf", (0.0, 0.5, 1.0), CURVES, settled=1750.0, events=(lift,)))
    said = words(chart)
    for expected in ("Rear tyres, lbf", "time, s", "rev 3", "rev 2", "front tyres lift", "0.5", "1"):
        assert expected in said
    assert path_of(chart, 1).count("L") == 2 and len(of_class(chart, "key")) == 2
    # The second curve has a hole where there is no value, and is not bridged.
    assert path_of(chart, 2).count("M") == 2
    assert only(chart, "settled").get("y1") == only(chart, "settled").get("y2")


def test_a_small_chart_keeps_order_and_proportion() -> None:
    (chart,) = drawn(line_chart("Rear tyres", "lbf", (0.0, 0.5, 1.0), CURVES[:1]))
    points = [tuple(map(float, one.split())) for one in path_of(chart, 1).lstrip("M").split("L")]
    (x1, y1), (x2, y2), (x3, y3) = points
    assert x2 - x1 == pytest.approx(x3 - x2, abs=0.2)
    assert (y1 - y2) / (y1 - y3) == pytest.approx(700 / 400, rel=0.02)


@pytest.mark.parametrize("values", [(), (None, None, None)])
def test_a_small_chart_without_values_says_so(values) -> None:
    (chart,) = drawn(line_chart("Rear tyres", "lbf", (0.0, 0.5, 1.0)[: len(values)], (Curve("rev 3", values),)))
    assert "no values" in words(chart)


def test_a_level_curve_is_drawn_too() -> None:
    (chart,) = drawn(line_chart("Pitch", "°", (0.0, 1.0), (Curve("", (0.0, 0.0)),)))
    assert "nan" not in path_of(chart, 1)


def test_nothing_drawn_carries_a_style_a_script_or_words_as_markup() -> None:
    hostile = "<script>alert(1)</script>\" onload='x'"
    texts = [side_view(scene(title=hostile, ghost=scene(title=hostile)), mode=mode) for mode in ("read", "choose", "paper")]
    texts.append(line_chart(hostile, hostile, (0.0, 1.0), (Curve(hostile, (0.0, 1.0)),), events=(Mark(0.5, hostile),)))
    for text in texts:
        for svg in drawn(text):
            for mark in svg.iter():
                assert mark.tag in {f"{SVG}{name}" for name in ("svg", "g", "line", "circle", "path", "text")}
                assert not {name for name in mark.keys() if name == "style" or name.startswith("on")}


@pytest.mark.parametrize("mode", ["choose", "read"])
def test_the_enlarged_view_is_never_tall_and_keeps_every_hole_in_sight(mode: str) -> None:
    tall = scene(struts=(Strut((0.06, 1.40), (-0.04, 0.24), "spring and shock"),))
    rear = drawn(side_view(tall, mode=mode))[0 if mode == "choose" else 1]
    width, height = map(float, rear.get("viewBox").split()[2:])
    assert height <= 0.6 * width + 1
    for hole in of_class(rear, "hole"):
        x, y = numbers(hole, "cx", "cy")
        assert 0 < x < width and 0 < y < height
    assert "spring and shock" in words(rear)


def test_holes_are_drawn_larger_where_one_chooses_than_a_tall_spring_would_let_them() -> None:
    tall = scene(struts=(Strut((0.06, 1.40), (-0.04, 0.24), "spring and shock"),))
    choose, read = drawn(side_view(tall, mode="choose"))[0], drawn(side_view(tall))[1]
    # The tyre is of one size, so its drawn radius is the scale.
    assert numbers(only(choose, "tyre"), "r")[0] > 1.3 * numbers(only(read, "tyre"), "r")[0]

"""The scaled side view: ground, tyres, links in their holes, springs, CG, instant centre and its lines.

One drawing serves measuring, choosing, reading a result and paper. Everything in it is a number;
a wrong entry looks wrong. Colours and line widths are the stylesheet's (static/css/drawing.css).
"""

from __future__ import annotations

import math

from django.utils.safestring import SafeString, mark_safe

from shop.drawing import marks
from shop.drawing.canvas import Canvas, Point
from shop.drawing.scene import Scene

REACH = 26.0
_TALLEST = 0.6  # of the enlarged view: its height as a share of its width


def side_view(scene: Scene, *, mode: str = "read") -> SafeString:
    """The whole car, and the rear enlarged below it, as SVG for a page.

    In mode "choose" every hole of the enlarged view is a button, and that view comes first;
    "paper" leaves it out.
    """
    whole = _whole(scene)
    if mode == "paper":
        return mark_safe(whole)  # noqa: S308  every word in it has been escaped
    rear = _rear(scene, mode == "choose")
    return mark_safe(rear + whole if mode == "choose" else whole + rear)  # noqa: S308


def _window(scene: Scene) -> Canvas:
    """Everything that stands in a hole or on the ground is inside, also where it should not be."""
    holes = [point for points in scene.brackets.values() for point in points]
    mounts = [point for strut in scene.struts for point in (strut.chassis, strut.housing)]
    points = [*holes, *mounts, scene.cg]
    if scene.wheelie_bar:
        points.append(scene.wheelie_bar)
    left = min(-scene.rear_radius, *(x for x, _ in points)) - 0.12
    right = max(scene.wheelbase + scene.front_radius, *(x for x, _ in points)) + 0.15
    top = max(2 * scene.rear_radius, 2 * scene.front_radius, *(z for _, z in points)) + 0.16
    return Canvas(left, right, min(0.0, *(z for _, z in points)) - 0.2, top)


def _whole(scene: Scene) -> str:
    canvas = _window(scene)
    marks.ground(canvas)
    marks.tyre(canvas, (0.0, scene.rear_radius), scene.rear_radius)
    marks.tyre(canvas, (scene.wheelbase, scene.front_radius), scene.front_radius)
    if scene.wheelie_bar:
        canvas.line((0.0, scene.rear_radius), scene.wheelie_bar, "wheelie-bar")
        canvas.dot(scene.wheelie_bar, 6, "axle")
    marks.lines(canvas, scene)
    if scene.ghost:
        marks.links(canvas, scene.ghost, "link ghost")
    for strut in scene.struts:
        canvas.line(strut.chassis, strut.housing, "strut")
    for place, holes in scene.brackets.items():
        for number, hole in enumerate(holes, 1):
            if number != scene.chosen.get(place):
                canvas.dot(hole, 1.6, "hole spare")
    marks.links(canvas, scene, "link")
    row = canvas.bottom + 0.06
    marks.dimension(canvas, (0.0, row), (scene.wheelbase, row), f"wheelbase {scene.length(scene.wheelbase)}")
    marks.centre_of_gravity(canvas, scene)
    marks.instant_centre(canvas, scene)
    marks.line_names(canvas, scene)
    if scene.ghost:
        canvas.text((canvas.left, canvas.top), f"dashed: {scene.ghost.title}", "label", dx=12, dy=26)
    return canvas.svg(_in_words(scene), "side-view")


def _rear_window(scene: Scene, choosing: bool) -> Canvas:
    """The brackets, the axle and the ground; where one is choosing, as large as that lets the holes be."""
    points = [hole for holes in scene.brackets.values() for hole in holes]
    if not choosing:
        points += [point for strut in scene.struts for point in (strut.chassis, strut.housing)]
    points += [(0.0, scene.rear_radius), (0.0, 0.0)]
    xs, zs = [p[0] for p in points], [p[1] for p in points]
    left, right, bottom, top = min(xs) - 0.12, max(xs) + 0.2, min(zs) - 0.05, max(zs) + 0.08
    # Beside a form a tall picture would be made small, and its words with it: more of the car ahead is shown instead.
    missing = max((top - bottom) / _TALLEST - (right - left), 0.0)
    return Canvas(left - 0.4 * missing, right + 0.6 * missing, bottom, top)


def _rear(scene: Scene, choosing: bool) -> str:
    canvas = _rear_window(scene, choosing)
    marks.ground(canvas)
    marks.tyre(canvas, (0.0, scene.rear_radius), scene.rear_radius)
    marks.lines(canvas, scene)
    if scene.ghost:
        marks.links(canvas, scene.ghost, "link ghost")
    for strut in scene.struts:
        canvas.line(strut.chassis, strut.housing, "strut")
        top = strut.chassis
        if not canvas.holds(top):
            top = canvas.clip(strut.housing, (top[0] - strut.housing[0], top[1] - strut.housing[1]))
        canvas.text(top, strut.label, "label", dx=12, dy=20)
    marks.links(canvas, scene, "link")
    marks.link_names(canvas, scene)
    # The chosen holes last: a spare one never lies over the pin.
    every = [(place, number, hole) for place, holes in scene.brackets.items() for number, hole in enumerate(holes, 1)]
    for place, number, hole in every if choosing else sorted(every, key=lambda one: scene.chosen.get(one[0]) == one[1]):
        reach = _reach(canvas, hole, every) if choosing else None
        marks.hole(canvas, place, number, hole, scene.chosen.get(place) == number, reach)
    title = "Rear suspension enlarged" + (": choose a hole" if choosing else "")
    return canvas.svg(title, "side-view rear", "group" if choosing else "img")


def _reach(canvas: Canvas, hole: Point, every: list[tuple[str, int, Point]]) -> float:
    """Half way to the nearest other hole: what one touches is what one gets (js/holes.js fills the gaps)."""
    here = canvas.at(hole)
    others = [math.dist(here, canvas.at(other)) for _, _, other in every if other != hole]
    return max(min([REACH, *(0.5 * gap for gap in others)]), 4.0)


def _in_words(scene: Scene) -> str:
    """The drawing for those who do not see it."""
    size = f"wheelbase {scene.length(scene.wheelbase)}, CG {scene.length(scene.cg[1])} above ground"
    return f"Side view of {scene.title or 'the car'}: {size}, {marks.where(scene)}"

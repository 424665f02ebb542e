"""The scaled side view: ground, tyres, links in their holes, springs, CG, instant centre and its lines.

One drawing serves measuring, choosing, reading a result and paper. Everything in it is a number;
a wrong entry looks wrong. Colours and line widths are the stylesheet's (static/css/drawing.css).
"""

from __future__ import annotations

from xml.sax.saxutils import quoteattr

from django.utils.safestring import SafeString, mark_safe

from shop.drawing.canvas import Canvas, Point
from shop.drawing.scene import Scene
from shop.garage.quantities import BRACKETS

_SHORT = {"lower": "lower link", "upper": "upper link", "ladder": "ladder bar"}


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


def _whole(scene: Scene) -> str:
    behind = min(-scene.rear_radius, scene.wheelie_bar[0] if scene.wheelie_bar else 0.0) - 0.12
    highest = max(
        [scene.cg[1], 2 * scene.rear_radius, *(strut.chassis[1] for strut in scene.struts)]
        + [z for holes in scene.brackets.values() for _, z in holes]
    )
    canvas = Canvas(behind, scene.wheelbase + scene.front_radius + 0.15, -0.24, highest + 0.14)
    _ground(canvas)
    for centre, radius in (
        ((0.0, scene.rear_radius), scene.rear_radius),
        ((scene.wheelbase, scene.front_radius), scene.front_radius),
    ):
        canvas.circle(centre, radius, "tyre")
        canvas.dot(centre, 5, "axle")
    if scene.wheelie_bar:
        canvas.line((0.0, scene.rear_radius), scene.wheelie_bar, "wheelie-bar")
        canvas.dot(scene.wheelie_bar, 6, "axle")
    _lines(canvas, scene)
    if scene.ghost:
        _links(canvas, scene.ghost, "link ghost")
    for strut in scene.struts:
        canvas.line(strut.chassis, strut.housing, "strut")
    for holes in scene.brackets.values():
        for hole in holes:
            canvas.dot(hole, 3, "hole")
    _links(canvas, scene, "link")
    _cg(canvas, scene)
    _centre(canvas, scene)
    _dimension(canvas, (0.0, -0.12), (scene.wheelbase, -0.12), f"wheelbase {scene.length(scene.wheelbase)}")
    return canvas.svg(_in_words(scene), "side-view")


def _rear(scene: Scene, choosing: bool) -> str:
    points = [hole for holes in scene.brackets.values() for hole in holes]
    points += [point for strut in scene.struts for point in (strut.chassis, strut.housing)]
    points += [(0.0, scene.rear_radius), (0.0, 0.0)]
    xs, zs = [p[0] for p in points], [p[1] for p in points]
    canvas = Canvas(min(xs) - 0.12, max(xs) + 0.2, min(0.0, *zs) - 0.05, max(zs) + 0.08)
    _ground(canvas)
    canvas.circle((0.0, scene.rear_radius), scene.rear_radius, "tyre")
    canvas.dot((0.0, scene.rear_radius), 7, "axle")
    _lines(canvas, scene)
    if scene.ghost:
        _links(canvas, scene.ghost, "link ghost")
    for strut in scene.struts:
        canvas.line(strut.chassis, strut.housing, "strut")
        canvas.text(strut.chassis, strut.label, "label", dx=8, dy=4)
    _links(canvas, scene, "link")
    for place, holes in scene.brackets.items():
        for number, hole in enumerate(holes, 1):
            _hole(canvas, place, number, hole, scene.chosen.get(place) == number, choosing)
    for name, chassis, housing in scene.links():
        middle = ((chassis[0] + housing[0]) / 2, (chassis[1] + housing[1]) / 2)
        canvas.text(middle, _SHORT[name], "label", dy=-10, anchor="middle")
    title = "Rear suspension enlarged" + (": choose a hole" if choosing else "")
    return canvas.svg(title, "side-view rear").replace('role="img"', 'role="group"' if choosing else 'role="img"')


def _hole(canvas: Canvas, place: str, number: int, hole: Point, chosen: bool, choosing: bool) -> None:
    x, y = canvas.at(hole)
    css = "hole chosen" if chosen else "hole"
    dot = f'<circle class="{css}" cx="{x:.1f}" cy="{y:.1f}" r="{9 if chosen else 7}"/>'
    if not choosing:
        canvas.add(dot)
        return
    name = quoteattr(f"{BRACKETS[place]}, hole {number}" + (", chosen" if chosen else ""))
    dx = 15 if place.endswith("chassis") else -15
    anchor = "start" if dx > 0 else "end"
    canvas.add(
        f'<g class="pick" data-bracket="{place}" data-hole="{number}" tabindex="0" role="button" '
        f'aria-pressed="{"true" if chosen else "false"}" aria-label={name}>'
        f'<circle class="reach" cx="{x:.1f}" cy="{y:.1f}" r="26"/>{dot}'
        f'<text class="number" x="{x + dx:.1f}" y="{y + 5:.1f}" text-anchor="{anchor}">{number}</text></g>'
    )


def _ground(canvas: Canvas) -> None:
    canvas.line((canvas.left, 0.0), (canvas.right, 0.0), "ground")


def _links(canvas: Canvas, scene: Scene, css: str) -> None:
    for _, chassis, housing in scene.links():
        canvas.line(chassis, housing, css)
        canvas.dot(chassis, 4, f"{css} pin")
        canvas.dot(housing, 4, f"{css} pin")


def _lines(canvas: Canvas, scene: Scene) -> None:
    """Neutral line through (L, h), force line towards the instant centre, links drawn out to it."""
    patch = (0.0, 0.0)
    canvas.line(patch, canvas.clip(patch, (scene.wheelbase, scene.cg[1])), "neutral-line")
    ahead = scene.centre is None or scene.centre[0] > 0
    direction = (1.0, scene.slope) if ahead else (-1.0, -scene.slope)
    canvas.line(patch, canvas.clip(patch, direction), "force-line")
    for name, chassis, housing in scene.links():
        if name != "ladder" and scene.centre is not None:
            end = scene.centre
            if not canvas.holds(end):
                end = canvas.clip(chassis, (end[0] - chassis[0], end[1] - chassis[1]))
            canvas.line(chassis if ahead else housing, end, "drawn-out")


def _cg(canvas: Canvas, scene: Scene) -> None:
    x, y = canvas.at(scene.cg)
    css = "cg provisional" if scene.cg_provisional else "cg"
    canvas.add(
        f'<g class="{css}"><circle cx="{x:.1f}" cy="{y:.1f}" r="11"/>'
        f'<path d="M{x:.1f} {y:.1f}h11a11 11 0 0 1-11 11zM{x:.1f} {y:.1f}h-11a11 11 0 0 1 11-11z"/></g>'
    )
    words = f"CG {scene.length(scene.cg[1])} up" + (", typical" if scene.cg_provisional else "")
    canvas.text(scene.cg, words, "label", dx=16, dy=-10)


def _centre(canvas: Canvas, scene: Scene) -> None:
    ghost, length = scene.ghost, scene.length
    if ghost and ghost.centre and canvas.holds(ghost.centre):
        canvas.dot(ghost.centre, 7, "centre ghost")
    if scene.centre is None:
        canvas.text((canvas.right, canvas.top), "links parallel: no instant centre", "label", dx=-10, dy=24, anchor="end")
        return
    words = f"instant centre {length(scene.centre[0])} ahead, {length(scene.centre[1])} up"
    if canvas.holds(scene.centre):
        x, y = canvas.at(scene.centre)
        canvas.add(
            f'<g class="centre"><circle cx="{x:.1f}" cy="{y:.1f}" r="8"/>'
            f'<path d="M{x - 13:.1f} {y:.1f}h26M{x:.1f} {y - 13:.1f}v26"/></g>'
        )
        near_edge = x > canvas.width * 0.6
        canvas.text(scene.centre, words, "label", dx=-14 if near_edge else 14, dy=26, anchor="end" if near_edge else "start")
        return
    forward = scene.centre[0] > canvas.left
    edge = canvas.right if scene.centre[0] > 0 else canvas.left
    height = min(max(scene.centre[1], canvas.bottom + 0.05), canvas.top - 0.05)
    arrow = "→" if scene.centre[0] > 0 and forward else "←"
    side = "end" if scene.centre[0] > 0 else "start"
    canvas.text((edge, height), f"{words} {arrow}", "label", dx=-10 if side == "end" else 10, anchor=side)


def _dimension(canvas: Canvas, start: Point, end: Point, words: str) -> None:
    canvas.line(start, end, "dimension")
    for point in (start, end):
        canvas.line((point[0], point[1] - 0.03), (point[0], point[1] + 0.03), "dimension")
    middle = ((start[0] + end[0]) / 2, start[1])
    canvas.text(middle, words, "label on-line", dy=22, anchor="middle")


def _in_words(scene: Scene) -> str:
    """The drawing for those who do not see it."""
    length = scene.length
    where = (
        "links parallel" if scene.centre is None
        else f"instant centre {length(scene.centre[0])} ahead of the axle and {length(scene.centre[1])} above ground"
    )
    size = f"wheelbase {length(scene.wheelbase)}, CG {length(scene.cg[1])} above ground"
    return f"Side view of {scene.title or 'the car'}: {size}, {where}"

"""The marks of the side view, one function each: ground, tyres, links, holes, CG, instant centre, lines, dimensions."""

from __future__ import annotations

import math
from xml.sax.saxutils import quoteattr

from shop.drawing.canvas import LETTER, Canvas, Point
from shop.drawing.scene import Scene
from shop.garage.quantities import BRACKETS

_SHORT = {"lower": "lower link", "upper": "upper link", "ladder": "ladder bar"}
_PATCH = (0.0, 0.0)


def ground(canvas: Canvas) -> None:
    canvas.line((canvas.left, 0.0), (canvas.right, 0.0), "ground")
    canvas.avoid((canvas.left, 0.0), (canvas.right, 0.0))


def tyre(canvas: Canvas, centre: Point, radius: float) -> None:
    canvas.circle(centre, radius, "tyre")
    canvas.dot(centre, 5, "axle")


def links(canvas: Canvas, scene: Scene, css: str) -> None:
    for _, chassis, housing in scene.links():
        canvas.line(chassis, housing, css)
        canvas.dot(chassis, 4, f"{css} pin")
        canvas.dot(housing, 4, f"{css} pin")


def link_names(canvas: Canvas, scene: Scene) -> None:
    for name, chassis, housing in scene.links():
        middle = ((chassis[0] + housing[0]) / 2, (chassis[1] + housing[1]) / 2)
        run = abs(chassis[0] - housing[0])
        steep = abs(chassis[1] - housing[1]) / run if run else 0.0
        # Half a name's length from the middle a steep link has come up to the words: they stand so much higher.
        canvas.text(middle, _SHORT[name], "label", dy=-10 - min(40 * steep, 60), anchor="middle")


def hole(canvas: Canvas, place: str, number: int, point: Point, chosen: bool, reach: float | None) -> None:
    """One hole of a bracket; a button that answers within `reach` where one is choosing."""
    x, y = canvas.at(point)
    css = "hole chosen" if chosen else "hole"
    dot = f'<circle class="{css}" cx="{x:.1f}" cy="{y:.1f}" r="{9 if chosen else 7}"/>'
    if reach is None:
        canvas.add(dot)
        return
    name = quoteattr(f"{BRACKETS[place]}, hole {number}" + (", chosen" if chosen else ""))
    dx = 15 if place.endswith("chassis") else -15
    canvas.add(
        f'<g class="pick" data-bracket="{place}" data-hole="{number}" tabindex="0" role="button" '
        f'aria-pressed="{"true" if chosen else "false"}" aria-label={name}>'
        f'<circle class="reach" cx="{x:.1f}" cy="{y:.1f}" r="{reach:.1f}"/>{dot}'
        f'<text class="number" x="{x + dx:.1f}" y="{y + 5:.1f}" text-anchor="{"start" if dx > 0 else "end"}">'
        f"{number}</text></g>"
    )


def lines(canvas: Canvas, scene: Scene) -> None:
    """Neutral line through (L, h), force line towards the instant centre, links drawn out to it."""
    for direction, css in (((scene.wheelbase, scene.cg[1]), "neutral-line"), (_force_direction(scene), "force-line")):
        end = canvas.clip(_PATCH, direction)
        canvas.line(_PATCH, end, css)
        canvas.avoid(_PATCH, end)
    for name, chassis, housing in scene.links():
        if name == "ladder" or scene.centre is None:
            continue
        end = scene.centre
        if not canvas.holds(end):
            end = canvas.clip(chassis, (end[0] - chassis[0], end[1] - chassis[1]))
        canvas.line(chassis if scene.centre[0] > 0 else housing, end, "drawn-out")


def line_names(canvas: Canvas, scene: Scene) -> None:
    """Which line is which, each at the far end of its line, the upper one above it and the lower one below."""
    neutral = scene.cg[1] / scene.wheelbase
    above = "neutral line" if neutral >= scene.slope else "force line"
    for words, direction in (("neutral line", (1.0, neutral)), ("force line", _force_direction(scene))):
        # A little short of the edge, and turned as the line is.
        x, y = canvas.at(_along(canvas.clip(_PATCH, direction), 0.97))
        x0, y0 = canvas.at(_PATCH)
        if math.hypot(x - x0, y - y0) < 150:
            continue  # the line leaves the window at once; there is nothing to stand on
        turn = math.degrees(math.atan2(y - y0, x - x0))
        ends = "end"
        if abs(turn) > 90:
            turn, ends = turn - 180, "start"
        dy = -7 if words == above else 20
        canvas.add(
            f'<text class="label line-name" text-anchor="{ends}" dy="{dy}" '
            f'transform="translate({x:.1f} {y:.1f}) rotate({turn:.2f})">{words}</text>'
        )


def _along(point: Point, share: float) -> Point:
    return (share * point[0], share * point[1])


def _force_direction(scene: Scene) -> Point:
    """From the rear patch to the instant centre; forward along the links' slope where they are parallel."""
    ahead = scene.centre is None or scene.centre[0] > 0
    return (1.0, scene.slope) if ahead else (-1.0, -scene.slope)


def centre_of_gravity(canvas: Canvas, scene: Scene) -> None:
    x, y = canvas.at(scene.cg)
    css = "cg provisional" if scene.cg_provisional else "cg"
    canvas.line((scene.cg[0], 0.0), scene.cg, "dimension")
    canvas.add(
        f'<g class="{css}"><circle cx="{x:.1f}" cy="{y:.1f}" r="11"/>'
        f'<path d="M{x:.1f} {y:.1f}h11a11 11 0 0 1-11 11zM{x:.1f} {y:.1f}h-11a11 11 0 0 1 11-11z"/></g>'
    )
    canvas.label(scene.cg, f"CG {scene.length(scene.cg[1])} up" + (", typical" if scene.cg_provisional else ""))


def where(scene: Scene) -> str:
    """The instant centre in words."""
    if scene.centre is None:
        return "links parallel: no instant centre"
    x, z = scene.centre
    ahead = f"{scene.length(abs(x))} {'ahead' if x >= 0 else 'behind'}"
    return f"instant centre {ahead}, {scene.length(abs(z))} {'up' if z >= 0 else 'below ground'}"


def instant_centre(canvas: Canvas, scene: Scene) -> None:
    ghost = scene.ghost
    if ghost and ghost.centre and canvas.holds(ghost.centre):
        canvas.dot(ghost.centre, 7, "centre ghost")
        canvas.avoid(ghost.centre, ghost.centre)
    if scene.centre is None:
        canvas.text((canvas.right, canvas.top), where(scene), "label", dx=-10, dy=24, anchor="end")
        return
    if not canvas.holds(scene.centre):
        _far(canvas, scene, scene.centre)
        return
    x, y = canvas.at(scene.centre)
    canvas.line((scene.centre[0], 0.0), scene.centre, "dimension")
    canvas.add(
        f'<g class="centre"><circle cx="{x:.1f}" cy="{y:.1f}" r="8"/>'
        f'<path d="M{x - 13:.1f} {y:.1f}h26M{x:.1f} {y - 13:.1f}v26"/></g>'
    )
    canvas.label(scene.centre, where(scene))


def _far(canvas: Canvas, scene: Scene, centre: Point) -> None:
    """An arrow at the edge towards an instant centre outside the window, and how far it is."""
    edge = canvas.clip(_PATCH, centre)
    x, y = canvas.at(edge)
    x0, y0 = canvas.at(_PATCH)
    turn = math.degrees(math.atan2(y - y0, x - x0))
    canvas.add(
        f'<path class="centre away" d="M0 0l-18 -7v14z" transform="translate({x:.1f} {y:.1f}) rotate({turn:.2f})"/>'
    )
    canvas.label(edge, where(scene))


def dimension(canvas: Canvas, start: Point, end: Point, words: str) -> None:
    """A level dimension line with its figure in the middle of it."""
    middle, gap = (start[0] + end[0]) / 2, (len(words) * LETTER / 2 + 8) / canvas.scale
    canvas.line(start, (max(middle - gap, start[0]), start[1]), "dimension")
    canvas.line((min(middle + gap, end[0]), end[1]), end, "dimension")
    tick = 9 / canvas.scale
    for x, z in (start, end):
        canvas.line((x, z - tick), (x, z + tick), "dimension")
    canvas.text((middle, start[1]), words, "label on-line", dy=6, anchor="middle")

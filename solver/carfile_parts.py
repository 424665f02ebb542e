"""Springs, shocks, tyres, stops and links as they stand in a car file."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING, Any

from solver.car import Adjuster, Click, Damper, FourLink, LadderBar, Link, RearSpring, Spring, Stop, Tyre

if TYPE_CHECKING:
    from solver.car import Table
    from solver.reading import Section

FORCE = (-1e6, 1e6)
SPRING_COLUMNS = ("compression in m", "force in N")
DAMPER_COLUMNS = ("velocity in m/s", "force in N")


def read_spring(section: Any) -> Any:
    """A spring from ``{"rate"}`` or ``{"table"}``, or None for a missing section."""
    if section is None:
        return None
    ratio = section.number("motion_ratio", 0.05, 5.0, "", default=1.0)
    if not _one_of_two(section, "rate", "table"):
        spring = Spring(rate=1.0)
    elif section.has("rate"):
        spring = Spring(section.number("rate", 100.0, 5e6, "N/m"), motion_ratio=ratio)
    else:
        table = section.table("table", SPRING_COLUMNS, ((-1.0, 1.0), FORCE))
        _force_must_rise(section, table)
        spring = Spring(table=table, motion_ratio=ratio)
    section.refuse_the_rest()
    return spring


def read_damper(section: Any) -> Any:
    """A shock from a rate, a table, or the dyno curves of its two adjusters."""
    if section is None:
        return None
    ratio = section.number("motion_ratio", 0.05, 5.0, "", default=1.0)
    if section.has("compression") or section.has("rebound"):
        strokes = [read_adjuster(section.section(key)) for key in ("compression", "rebound")]
        damper = Damper(compression=strokes[0], rebound=strokes[1], motion_ratio=ratio)
    elif not _one_of_two(section, "rate", "table"):
        damper = Damper(rate=0.0)
    elif section.has("rate"):
        damper = Damper(section.number("rate", 0.0, 2e5, "N s/m"), motion_ratio=ratio)
    else:
        table = section.table("table", DAMPER_COLUMNS, ((-20.0, 20.0), FORCE))
        _force_must_not_fall(section, table)
        _no_push_at_rest(section, table)
        damper = Damper(table=table, motion_ratio=ratio)
    section.refuse_the_rest()
    return damper


def read_adjuster(section: Any) -> Any:
    """The dyno'd clicks of one stroke; the setting must lie between two of them."""
    if section is None:
        return None
    setting = section.number("setting", 0.0, 100.0, "clicks")
    clicks = tuple(_read_click(part) for part in section.sections("clicks", 1, 12))
    names = [click.click for click in clicks]
    if any(not b > a for a, b in pairwise(names)):
        section.fault("clicks", names, "the clicks must rise from curve to curve")
    elif names and not names[0] <= setting <= names[-1]:
        section.fault(
            "setting",
            setting,
            f"must be from click {names[0]:g} to {names[-1]:g}: a shock is not guessed beyond what was on the dyno",
        )
    section.refuse_the_rest()
    return Adjuster(setting, clicks)


def _read_click(section: Any) -> Any:
    click = section.number("click", 0.0, 100.0, "clicks")
    table = section.table("table", ("speed in m/s", "force in N"), ((0.0, 20.0), (0.0, 1e6)))
    if table and table[0] != (0.0, 0.0):
        section.fault("table", table[0], "must begin at [0, 0]: no force at no speed")
    _force_must_not_fall(section, table)
    section.refuse_the_rest()
    return Click(click, table)


def read_tyre(section: Any, driven: bool) -> Any:
    """A tyre; grip is read on the driven axle only."""
    if section is None:
        return None
    rate = section.number("rate", 1e4, 1e7, "N/m")
    damping = section.number("damping", 0.0, 1e5, "N s/m", default=0.0)
    extra = {}
    if driven:
        extra = {
            "grip": section.optional_number("grip", 0.05, 10.0, ""),
            "sliding_grip": section.optional_number("sliding_grip", 0.05, 10.0, ""),
            "slip_stiffness": section.optional_number("slip_stiffness", 1e3, 1e7, "N"),
            "relaxation_length": section.optional_number("relaxation_length", 0.05, 3.0, "m"),
        }
    section.refuse_the_rest()
    return Tyre(rate, damping, **extra)


def read_stop(section: Any, own_mounts: bool) -> Any:
    """A bump or droop stop; on the rear it may stand on mounts of its own."""
    if section is None:
        return None
    clearance = section.number("clearance", 1e-4, 1.0, "m, open at ride height")
    damping = section.number("damping", 0.0, 1e5, "N s/m", default=0.0)
    rate, table = None, None
    if _one_of_two(section, "rate", "table"):
        if section.has("rate"):
            rate = section.number("rate", 1e3, 1e7, "N/m")
        else:
            table = section.table("table", SPRING_COLUMNS, ((0.0, 1.0), (0.0, 1e6)))
            if table and table[0] != (0.0, 0.0):
                section.fault("table", table[0], "must begin at [0, 0]: first touch, no force")
            _force_must_rise(section, table)
    mounts = {}
    if own_mounts and (section.has("chassis") or section.has("housing")):
        mounts = {"chassis": section.point("chassis"), "housing": section.point("housing", 3.0)}
    section.refuse_the_rest()
    return Stop(clearance, rate, damping, table, **mounts)


def read_linkage(section: Any) -> Any:
    """A four-link or a ladder bar, or None with its faults noted."""
    if section is None:
        return None
    kind = section.choice("kind", ("four-link", "ladder-bar"))
    linkage: FourLink | LadderBar | None = None
    if kind == "four-link":
        lower, upper = (_read_link(section.section(key)) for key in ("lower", "upper"))
        linkage = FourLink(lower, upper) if lower and upper else None
    elif kind == "ladder-bar":
        linkage = LadderBar(section.point("chassis"))
    section.refuse_the_rest()
    return linkage


def _read_link(section: Any) -> Any:
    if section is None:
        return None
    link = Link(
        section.point("chassis"),
        section.point("housing", 3.0),
        section.number("plan_angle", -1.2, 1.2, "rad", default=0.0),
    )
    section.refuse_the_rest()
    return link


def read_rear_spring(section: Section) -> RearSpring:
    """One line between mounts; it must carry a spring or a damper."""
    entry = RearSpring(
        section.point("chassis"),
        section.point("housing", 3.0),
        read_spring(section.optional_section("spring")),
        read_damper(section.optional_section("damper")),
    )
    if entry.spring is None and entry.damper is None:
        section.fault("", None, "has neither a spring nor a damper: it needs one of them")
    section.refuse_the_rest()
    return entry


def _one_of_two(section: Section, first: str, second: str) -> bool:
    both = section.has(first), section.has(second)
    if both == (True, True):
        section.fault(second, section.data[second], f"cannot stand beside {first}: give one")
    elif both == (False, False):
        section.fault("", None, f"needs a {first} or a {second}")
    return any(both)


def _force_must_rise(section: Section, table: Table) -> None:
    if any(not b[1] > a[1] for a, b in pairwise(table)):
        section.fault("table", table, "the force must rise with every further compression")


def _force_must_not_fall(section: Section, table: Table) -> None:
    if any(b[1] < a[1] for a, b in pairwise(table)):
        section.fault("table", table, "the force must not fall as the speed rises")


def _no_push_at_rest(section: Section, table: Table) -> None:
    """A shock table must pass through no force at no speed, or ride height is not at rest."""
    if len(table) < 2:
        return
    i = max(1, min(len(table) - 1, sum(v <= 0.0 for v, _ in table)))
    (v0, f0), (v1, f1) = table[i - 1], table[i]
    at_rest = f0 - v0 * (f1 - f0) / (v1 - v0)
    if not abs(at_rest) <= 1e-6 * max(abs(f) for _, f in table):
        section.fault("table", table, "must give no force at no speed: add the point [0, 0]")

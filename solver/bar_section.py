"""The car file's optional ``bars`` section: what the links are made of."""

from __future__ import annotations

import math

from solver.bar_check import Bar
from solver.car import FourLink, LadderBar
from solver.fasteners import STRESS_AREA_CONSTANT, RodEnd, Thread
from solver.loads import BarPlan
from solver.members import NORMALISED_4130, Allowances, Material
from solver.reading import Section

# Names that stand for a material's figures, so that a file need not repeat them.
MATERIALS = {"4130 normalised": NORMALISED_4130}
MAX_PARTS = 8


def read_bars(section: Section | None, linkage: FourLink | LadderBar | None) -> BarPlan | None:
    """Read the section.

    Parameters
    ----------
    section : solver.reading.Section or None
    linkage : solver.car.FourLink or solver.car.LadderBar or None
        None when the linkage itself was at fault.

    Returns
    -------
    BarPlan or None
        None without the section; only of use when the section found no faults.
    """
    if section is None:
        return None
    if linkage is not None and not isinstance(linkage, FourLink):
        section.fault(
            "",
            None,
            "is for four-link bars; a ladder bar is a frame in bending: have it designed by a qualified fabricator",
        )
    lower = _bar(section.optional_section("lower"), "lower bar")
    upper = _bar(section.optional_section("upper"), "upper bar")
    plan = BarPlan(lower, upper, _allowances(section.optional_section("allowances")))
    section.refuse_the_rest()
    if lower is None and upper is None:
        section.fault("", None, "describes no bar: lower, upper or both are needed")
    return plan


def _allowances(part: Section | None) -> Allowances:
    if part is None:
        return Allowances()
    dynamic = part.number("dynamic", 1.0, 10.0, "", default=Allowances.dynamic)
    fatigue = part.number("fatigue", 0.05, 1.0, "", default=Allowances.fatigue)
    stated = part.has("dynamic") or part.has("fatigue")
    source = "typed in the car file" if stated else Allowances.source
    if part.has("source"):
        source = part.text("source")
    part.refuse_the_rest()
    if math.isnan(dynamic) or math.isnan(fatigue):
        return Allowances()
    return Allowances(dynamic, fatigue, source)


def _bar(part: Section | None, name: str) -> Bar | None:
    if part is None:
        return None
    bar = Bar(
        name=part.text("name") if part.has("name") else name,
        outside_diameter=part.number("outside_diameter", 0.005, 0.2, "m"),
        wall=part.number("wall", 0.0002, 0.1, "m"),
        material=_material(part),
        length=part.optional_number("length", 0.05, 3.0, "m"),
        count=_count(part),
        fixity=part.number("fixity", 0.25, 4.0, "", default=1.0),
        bow=part.number("bow", 0.0, 0.1, "m", default=0.0),
        threads=tuple(_thread(item) for item in _list(part, "threads")),
        rod_ends=tuple(_rod_end(item) for item in _list(part, "rod_ends")),
    )
    if bar.wall > bar.outside_diameter / 2:
        part.fault("wall", bar.wall, "must be at most half the outside diameter")
    part.refuse_the_rest()
    return bar


def _list(part: Section, key: str) -> list[Section]:
    return part.sections(key, 0, MAX_PARTS) if part.has(key) else []


def _count(part: Section) -> int:
    count = part.number("count", 1, 4, "bars", default=2)
    if count == count and count != int(count):
        part.fault("count", count, "must be a whole number of bars")
    return int(count) if count == count else 2


def _material(part: Section) -> Material:
    if isinstance(part.data.get("material"), str):
        name = part.choice("material", tuple(MATERIALS))
        return MATERIALS.get(name, NORMALISED_4130)
    found = part.section("material")
    if found is None:
        return NORMALISED_4130
    material = Material(
        name=found.text("name"),
        modulus=found.number("modulus", 1e9, 1e12, "Pa"),
        yield_strength=found.number("yield_strength", 1e7, 5e9, "Pa"),
        ultimate_strength=found.optional_number("ultimate_strength", 1e7, 5e9, "Pa"),
        source=found.text("source") if found.has("source") else Material.source,
    )
    found.refuse_the_rest()
    return material


def _thread(part: Section) -> Thread:
    thread = Thread(
        diameter=part.number("diameter", 0.003, 0.1, "m"),
        pitch=part.number("pitch", 0.0002, 0.01, "m"),
        proof_strength=part.number("proof_strength", 1e7, 5e9, "Pa"),
        form=part.choice("form", tuple(STRESS_AREA_CONSTANT), default="unified"),
    )
    part.refuse_the_rest()
    if thread.pitch > 0.4 * thread.diameter:
        part.fault("pitch", thread.pitch, f"is too coarse for a thread of {thread.diameter:g} m")
    return thread


def _rod_end(part: Section) -> RodEnd:
    shank = part.optional_section("shank")
    rod_end = RodEnd(
        name=part.text("name"),
        radial_rating=part.number("radial_rating", 100.0, 1e7, "N"),
        rating_source=part.text("rating_source"),
        shank=_thread(shank) if shank is not None else None,
    )
    part.refuse_the_rest()
    return rod_end

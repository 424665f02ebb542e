"""The track's forms laid out for their pages: each input with its unit, its help and its fault."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from django import forms

from shop.garage.models import Car
from shop.setups.models import Revision
from shop.track.forms import PassForm, WeekendForm
from shop.track.models import Pass
from shop.track.on_the_car import NONE
from shop.track.quantities import ELEVATION, PRESSURE_KINDS, QUANTITIES, SECTIONS
from shop.track.slip import COLUMNS, SPEED_UNITS
from shop.units import DIMENSIONS

Choices = Sequence[tuple[Any, str]]


@dataclass(frozen=True)
class Field:
    """One input. `kind` is decimal, text, area, date, time, whole, choice or tick."""

    name: str
    label: str
    kind: str
    value: str = ""
    fault: str = ""
    help: str = ""
    unit: str = ""
    units: tuple[str, ...] = ()
    choices: Choices = ()
    longest: int = 60
    optional: bool = True


def _value(form: forms.Form, name: str) -> str:
    value = form[name].value()
    return "" if value is None or value is False else str(value)


def _fault(form: forms.Form, name: str) -> str:
    return " ".join(map(str, form.errors.get(name, []))) if form.is_bound else ""


def _field(form: forms.Form, name: str, label: str, kind: str, **more: Any) -> Field:
    return Field(name, label, kind, _value(form, name), _fault(form, name), **more)


def weekend_fields(form: WeekendForm, units: str) -> list[Field]:
    unit = _value(form, "elevation_unit") or ELEVATION.unit(units)
    lengths = tuple(DIMENSIONS["distance"])
    return [
        _field(form, "place", "Place", "text", longest=80, optional=False),
        _field(form, "starts_on", "First day", "date", optional=False),
        _field(form, "ends_on", "Last day", "date", help="Empty for an event of one day."),
        _field(form, "elevation", ELEVATION.label, "decimal", unit=unit, units=lengths, help=ELEVATION.help),
        _field(form, "surface", "Surface", "area", longest=4000, help="How the track was prepared, and how it held."),
        _field(form, "notes", "Notes", "area", longest=4000),
    ]


def revision_choices(car: Car) -> list[tuple[str, str]]:
    issued = Revision.objects.filter(car=car, number__isnull=False).order_by("-number")
    return [*((str(r.pk), f"{r.label}: {r.reason[:60]}") for r in issued), (NONE, "no revision known")]


def pass_sections(form: PassForm, cars: Choices, revisions: Choices) -> list[tuple[str, str, list[Field]]]:
    """(key, title, fields) in the order in which a pass is told."""
    speed_unit = _value(form, "speed_unit") or ("km/h" if form.shop.units == "metric" else "mph")
    return [
        ("which", "Which pass", [
            _field(form, "car", "Car", "choice", choices=cars, optional=False),
            _field(form, "revision", "On the car", "choice", choices=revisions,
                   help="A pass without a revision is kept, but not counted in comparisons."),
            _field(form, "number", "Pass", "whole", help="Empty takes the car's next number."),
            _field(form, "day", "Day", "date"),
            _field(form, "clock", "Time of day, by the track's clock", "time"),
            _field(form, "lane", "Lane", "choice", choices=[("", "not noted"), *Pass.LANES]),
        ]),
        ("slip", "Time slip, only what it shows", [
            *(_field(form, c.field, c.label, "decimal", unit="s" if c.kind != "speed" else speed_unit) for c in COLUMNS),
            Field("speed_unit", "Speeds on this slip are in", "choice", speed_unit, _fault(form, "speed_unit"),
                  choices=[(unit, unit) for unit in SPEED_UNITS]),
        ]),
        ("aborted", "If it was aborted", [
            _field(form, "aborted", "Aborted", "tick",
                   help="Lifted, shut off, out of its lane: the slip is not what the car can do."),
            _field(form, "abort_reason", "Why", "text", longest=200),
            _field(form, "good_to", "The slip still counts", "choice",
                   choices=[("", "to no mark"), *((field, f"to {mark}") for field, mark in Pass.GOOD_TO)]),
        ]),
        ("launch", SECTIONS["launch"], [
            *_readings(form, "launch"),
            _field(form, "drive_notes", "Clutch or converter", "text", longest=400),
            _field(form, "staging_notes", "Staging", "text", longest=400),
        ]),
        ("tyres", SECTIONS["tyres"], _readings(form, "tyres")),
        ("weather", SECTIONS["weather"], [
            *_readings(form, "weather"),
            _field(form, "pressure_kind", "The pressure is", "choice", choices=PRESSURE_KINDS),
        ]),
        ("seen", "What was seen", [
            _field(form, "driver_saw", "The driver", "area", longest=4000),
            _field(form, "crew_saw", "The crew", "area", longest=4000),
        ]),
    ]


def _readings(form: PassForm, section: str) -> list[Field]:
    return [
        _field(form, q.key, q.label, "decimal", unit=form.unit_of(q), units=tuple(DIMENSIONS[q.dimension]), help=q.help)
        for q in QUANTITIES if q.section == section
    ]

"""What a list of cars shows of each: its revision, how its launch stands, how much is provisional."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from django.db.models import Count, Q

from shop.garage.models import Car, Survey
from shop.launches.models import Job
from shop.setups.models import Revision


@dataclass(frozen=True)
class CarLine:
    car: Car
    current: Revision | None
    job: Job | None
    typical: int
    measured: bool


def jobs_of(revisions: Iterable[Revision]) -> dict[int, Job]:
    """The newest launch of each revision, by the revision's id."""
    newest: dict[int, Job] = {}
    for job in Job.objects.filter(revision__in=list(revisions), kind="launch").order_by("id"):
        newest[job.revision_id] = job
    return newest


def car_lines(cars: Iterable[Car]) -> list[CarLine]:
    """A line for each car, in a fixed number of queries however many there are."""
    cars = list(cars)
    current: dict[int, Revision] = {}
    for revision in Revision.objects.filter(car__in=cars, number__isnull=False).order_by("number").defer("car_file"):
        current[revision.car_id] = revision
    jobs = jobs_of(current.values())
    typical = {
        survey.car_id: survey.typical_count
        for survey in Survey.objects.filter(car__in=cars)
        .annotate(typical_count=Count("measurements", filter=Q(measurements__origin="typical")))
        .order_by("number")
    }
    return [
        CarLine(
            car, current.get(car.pk), jobs.get(current[car.pk].pk) if car.pk in current else None,
            typical.get(car.pk, 0), car.pk in typical,
        )
        for car in cars
    ]

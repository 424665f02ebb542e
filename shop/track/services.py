"""Writing weekends and passes."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

from django.db import IntegrityError, transaction
from django.db.models import Max, ProtectedError

from shop.garage.models import Car
from shop.people.log import record
from shop.people.models import Membership
from shop.refusals import Refused, Stale
from shop.setups.models import Revision
from shop.track.models import Pass, WeatherReading, Weekend
from shop.track.quantities import BY_KEY
from shop.track.slip import COLUMNS, figure_text

Values = Mapping[str, Any]


def add_weekend(member: Membership, values: Values) -> Weekend:
    with transaction.atomic():
        weekend = Weekend.objects.create(shop=member.shop, **values)
        record(member, "entered", weekend)
    return weekend


def save_weekend(member: Membership, weekend: Weekend, version: int, values: Values) -> Weekend:
    """Write over the weekend as it was at `version`; passes that would fall outside its days refuse that."""
    with transaction.atomic():
        _passes_stay_inside(weekend, values)
        changed = Weekend.objects.filter(pk=weekend.pk, version=version).update(**values, version=version + 1)
        if not changed:
            raise Stale(Weekend.objects.get(pk=weekend.pk))
        saved = Weekend.objects.get(pk=weekend.pk)
        record(member, "changed", saved)
    return saved


def _passes_stay_inside(weekend: Weekend, values: Values) -> None:
    first = weekend.passes.order_by("day").first()
    if first and first.day < values["starts_on"]:
        raise Refused({"starts_on": f"{first} ran on {first.day}, before this day"})
    last = weekend.passes.order_by("-day").first()
    if last and (last.day - values["ends_on"]).days > 1:
        raise Refused({"ends_on": f"{last} ran on {last.day}, after this day"})


def remove_weekend(member: Membership, weekend: Weekend) -> None:
    """Only a weekend without passes can go."""
    try:
        with transaction.atomic():
            record(member, "removed", weekend)
            weekend.delete()
    except ProtectedError as error:
        raise Refused(f"{weekend} holds passes and stays; remove those first") from error


def add_pass(member: Membership, weekend: Weekend, values: Values) -> Pass:
    """Enter a pass under the car's next number; the same form sent twice gives the first one back."""
    with transaction.atomic():
        _one_at_a_time(values["car"])
        key = values.get("entry_key")
        if key and (known := Pass.objects.filter(entry_key=key).first()):
            return known
        run = _create(member, weekend, values)
        record(member, "entered", run)
    return run


def _one_at_a_time(car: Car) -> None:
    # Pass numbers of a car are handed out to one person at a time.
    Car.objects.select_for_update().get(pk=car.pk)


def _create(member: Membership, weekend: Weekend, values: Values) -> Pass:
    taken = Pass.objects.filter(weekend=weekend, car=values["car"])
    number = values.get("number") or (taken.aggregate(most=Max("number"))["most"] or 0) + 1
    if taken.filter(number=number).exists():
        raise Refused({"number": f"pass {number} of {values['car']} is already entered"})
    return Pass.objects.create(
        shop=member.shop, weekend=weekend, entered_by=member.user, **{**values, "number": number}
    )


def save_pass(member: Membership, run: Pass, version: int, values: Values) -> Pass:
    """Write over the pass as it was at `version`; Stale when it is no longer that."""
    fields = {name: value for name, value in values.items() if name != "entry_key"}
    fields["number"] = fields.get("number") or run.number
    try:
        with transaction.atomic():
            changed = Pass.objects.filter(pk=run.pk, version=version).update(**fields, version=version + 1)
            if not changed:
                raise Stale(Pass.objects.select_related("car", "revision", "weekend").get(pk=run.pk))
            saved = Pass.objects.select_related("car", "revision").get(pk=run.pk)
            record(member, "changed", saved, reason=changes_text(run, saved))
    except IntegrityError as error:
        raise Refused({"number": f"pass {fields['number']} of {run.car} is already entered"}) from error
    return saved


_NAMED = ("revision", "number", "day", "clock", "lane", "aborted", "good_to")


def changes_text(before: Pass, after: Pass) -> str:
    """What was changed on a pass, in the words of its slip, for the log."""
    words = []
    for column in COLUMNS:
        was, now = getattr(before, column.field), getattr(after, column.field)
        if was != now:
            said = [figure_text(column, value, run.speed_unit) for value, run in ((was, before), (now, after))]
            words.append(f"{column.label} {said[0]} to {said[1]}")
    for name in _NAMED:
        was, now = getattr(before, name), getattr(after, name)
        if was != now:
            words.append(f"{name.replace('_', ' ')} {_word(was)} to {_word(now)}")
    words += [BY_KEY[key].label.lower() for key in BY_KEY if before.readings.get(key) != after.readings.get(key)]
    return "; ".join(words) or "notes"


def _word(value: object) -> str:
    if isinstance(value, Revision):
        return value.label
    return "none" if value in (None, "") else str(value)


def remove_pass(member: Membership, run: Pass, version: int) -> None:
    """Take a pass out that was entered by mistake; the log keeps what its slip said."""
    with transaction.atomic():
        record(member, "removed", run, reason=f"{run.figures_text()}, {run.weekend}")
        gone, _ = Pass.objects.filter(pk=run.pk, version=version).delete()
        if not gone:
            raise Stale(run)


def import_passes(
    member: Membership, weekend: Weekend, rows: Iterable[Values], fills: Iterable[tuple[Pass, Values]], file_name: str
) -> int:
    """Enter the passes of a file and what it adds to passes already here, all or none."""
    with transaction.atomic():
        entered = filled = 0
        for values in rows:
            _one_at_a_time(values["car"])
            _create(member, weekend, values)
            entered += 1
        for run, values in fills:
            changed = Pass.objects.filter(pk=run.pk, version=run.version).update(**values, version=run.version + 1)
            if not changed:
                raise Refused(f"{run} was changed by somebody else just now; nothing has been written, look once more")
            filled += 1
        words = f"{entered} new, {filled} filled in, from {file_name[:120] or 'a file'}"
        record(member, "imported passes", weekend, reason=words)
    return entered + filled


def import_weather(member: Membership, weekend: Weekend, rows: Iterable[Values], file_name: str) -> int:
    """Add a station's readings, all or none."""
    with transaction.atomic():
        readings = [WeatherReading(shop=member.shop, weekend=weekend, **values) for values in rows]
        WeatherReading.objects.bulk_create(readings, batch_size=500)
        words = f"{len(readings)} readings from {file_name[:120] or 'a file'}"
        record(member, "imported weather", weekend, reason=words)
    return len(readings)


def clear_weather(member: Membership, weekend: Weekend) -> int:
    """Drop a weekend's station readings, so that a right file can replace a wrong one."""
    with transaction.atomic():
        gone, _ = WeatherReading.objects.filter(weekend=weekend).delete()
        record(member, "removed weather", weekend, reason=f"{gone} readings")
    return gone

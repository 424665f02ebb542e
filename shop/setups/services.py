"""Writing revisions: a draft is begun, saved, thrown away or issued. An issued one never changes."""

from __future__ import annotations

from datetime import datetime

from django.db import transaction
from django.db.models import Max, ProtectedError
from django.utils import timezone

from shop.garage.models import Car, Survey
from shop.launches import bridge
from shop.launches.services import request_launch
from shop.people.log import record
from shop.people.models import Membership
from shop.refusals import Refused, Stale
from shop.setups.choices import Choices, beginning
from shop.setups.models import Revision


def new_revision(
    member: Membership, car: Car, survey: Survey, parent: Revision | None, choices: Choices | None = None
) -> Revision:
    """An unsaved draft: what the form previews, and what `start_draft` saves."""
    if survey.car_id != car.pk:
        raise Refused({"survey": f"{survey} is not a survey of {car}"})
    if parent is not None and (parent.car_id != car.pk or not parent.issued):
        raise Refused({"parent": f"a revision starts from an issued revision of {car}"})
    draft = Revision(shop=member.shop, car=car, survey=survey, parent=parent, author=member.user)
    if parent is not None:
        draft.parts = dict(parent.parts)
    return (choices or beginning(survey, parent)).put_on(draft)


def start_draft(
    member: Membership, car: Car, survey: Survey, parent: Revision | None, choices: Choices | None = None
) -> Revision:
    """Begin a draft: from the parent's settings and holes, else the survey's, unless `choices` are given."""
    draft = new_revision(member, car, survey, parent, choices)
    with transaction.atomic():
        draft.save()
        record(member, "began", draft)
    return draft


def save_draft(member: Membership, draft: Revision, version: int, choices: Choices) -> Revision:
    """Write `choices` over the draft as it was at `version`; Stale when it is no longer that."""
    with transaction.atomic():
        changed = Revision.objects.filter(pk=draft.pk, version=version, number__isnull=True).update(
            **choices.fields(), version=version + 1
        )
        if not changed:
            raise _stale(draft)
        saved = Revision.objects.get(pk=draft.pk)
        record(member, "saved", saved)
    return saved


def discard_draft(member: Membership, draft: Revision, version: int) -> None:
    """Throw a draft away; what was issued stays."""
    try:
        with transaction.atomic():
            record(member, "discarded", draft)
            gone, _ = Revision.objects.filter(pk=draft.pk, version=version, number__isnull=True).delete()
            if not gone:
                raise _stale(draft)
    except ProtectedError as error:
        raise Refused(f"{draft} has work that hangs on it and cannot be thrown away") from error


def issue(
    member: Membership, draft: Revision, version: int, newest_seen: int | None = None, at: datetime | None = None
) -> Revision:
    """Freeze the draft under the car's next number and queue its launch, in one transaction.

    `newest_seen` is the newest number the person knew of (0 for none): when somebody else has
    issued since, this one is refused in words, so that it is not issued on an old footing by
    accident. Without it the next number is taken. The draft is kept whenever this refuses. `at` is
    for a revision that is entered after the day it was issued on; now, where it is left out.
    """
    if not draft.reason.strip():
        raise Refused({"reason": "say what this revision changes, and why: it goes on the sheet"})
    car_file = bridge.check(draft)
    with transaction.atomic():
        # Numbers are handed out one person at a time for each car.
        Car.objects.select_for_update().get(pk=draft.car_id)
        _survey_as_read(draft)
        number = _next_number(draft, newest_seen)
        changed = Revision.objects.filter(pk=draft.pk, version=version, number__isnull=True).update(
            number=number,
            issued_at=at or timezone.now(),
            author=member.user,
            car_file={**car_file, "name": f"{draft.car}, rev {number}"},
            version=version + 1,
        )
        if not changed:
            raise _stale(draft)
        revision = Revision.objects.select_related("car", "survey", "parent", "author").get(pk=draft.pk)
        request_launch(member, revision)
        record(member, "issued", revision, reason=revision.reason)
    return revision


def newest_number(car: Car) -> int:
    """The newest issued number of a car, 0 when none has been issued."""
    return Revision.objects.filter(car=car).aggregate(newest=Max("number"))["newest"] or 0


def _next_number(draft: Revision, newest_seen: int | None) -> int:
    newest = newest_number(draft.car)
    if newest_seen is not None and newest_seen != newest:
        other = Revision.objects.select_related("author").get(car=draft.car_id, number=newest)
        raise Refused(
            f"{other.author} issued {other.label} of {draft.car} while you were writing this: “{other.reason}”. "
            f"Your draft is kept. Look at {other.label} first; if yours still stands, issue it again and it becomes "
            f"rev {newest + 1}."
        )
    return newest + 1


def _survey_as_read(draft: Revision) -> None:
    """The frozen car file must be of the survey as it now stands."""
    if not Survey.objects.select_for_update().filter(pk=draft.survey_id, version=draft.survey.version).exists():
        raise Refused(f"{draft.survey} was changed while this was being issued; look at the figures once more")


def _stale(draft: Revision) -> Exception:
    now = Revision.objects.select_related("car", "author").filter(pk=draft.pk).first()
    if now is None:
        return Refused("somebody threw this draft away since this page was opened; keep it as a new draft")
    if now.issued:
        return Refused(f"{now.author} has issued this draft as {now.label} since this page was opened; "
                       "start the next revision from it")
    return Stale(now)

"""Asking for a study, working on it chunk by chunk, and reading what there is so far."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import timedelta
from typing import Any

from django.db import transaction
from django.db.models import F, Q
from django.utils import timezone

from shop.launches.models import Job
from shop.launches.services import queue, send
from shop.people.log import record
from shop.people.models import Membership
from shop.refusals import Refused, Stale
from shop.setups.models import Revision
from shop.studies import work
from shop.studies.models import Chunk, Study, Yardstick
from shop.studies.plan import Plan, read_plan
from shop.studies.spread import tolerances_of

# The first rows should be there before a person looks up; after that, chunks large enough to be cheap.
FIRST_CHUNK = 64
CHUNK = 1024
CHUNK_LEASE = timedelta(seconds=30)
# A message for each worker that may help; what finds nothing left to do ends at once.
HELPERS = 3


def request_study(
    member: Membership,
    revision: Revision,
    plan_data: Mapping[str, Any],
    name: str,
    limits: Mapping[str, Any] | None = None,
    weights: Mapping[str, float] | None = None,
) -> Study:
    """Queue the launches of every choice of a plan, in chunks. Refused when the plan asks for nothing or too much."""
    if not revision.issued:
        raise Refused("a study starts from an issued revision; issue the draft first")
    plan = work.with_base(read_plan(plan_data), revision)
    stored = work.stored_input(revision, plan)
    _all_drilled(plan, stored["brackets"])
    if plan.mode == "few":
        stored["tolerances"] = tolerances_of(revision)
    count = len(plan)
    with transaction.atomic():
        job = queue(member, revision, "study", stored)
        study = Study.objects.create(
            shop=member.shop,
            revision=revision,
            job=job,
            name=(name.strip() or "Study")[:120],
            plan=plan.to_dict(),
            choices=count,
            limits=limits or {},
            weights=weights or {},
            author=member.user,
        )
        starts = [0, *range(FIRST_CHUNK, count, CHUNK)]
        stops = [*starts[1:], count]
        Chunk.objects.bulk_create(
            Chunk(shop=member.shop, study=study, start=start, stop=min(stop, count))
            for start, stop in zip(starts, stops, strict=True)
            if start < count
        )
        record(member, "asked for", study, choices=count)
        for _ in range(HELPERS):
            transaction.on_commit(lambda: send(job))
    return study


def _all_drilled(plan: Plan, brackets: Mapping[str, Any]) -> None:
    faults = {}
    for axis in plan.axes:
        if axis.is_hole:
            count = len(brackets.get(axis.key, []))
            missing = [f"{number:g}" for number in axis.values if not 1 <= number <= count]
            if missing:
                faults[axis.key] = f"{axis.label} has holes 1 to {count}; not drilled: {', '.join(missing)}"
    if faults:
        raise Refused(faults)


def take_chunk(study: Study) -> Chunk | None:
    """The next chunk nobody has, or whose worker died: claimed by one conditional write."""
    while True:
        now = timezone.now()
        free = study.chunks.filter(done_at__isnull=True).filter(Q(lease_until__isnull=True) | Q(lease_until__lt=now))
        chunk = free.order_by("start").only("id", "start", "stop", "attempt", "study_id").first()
        if chunk is None:
            return None
        taken = Chunk.objects.filter(pk=chunk.pk, attempt=chunk.attempt, done_at__isnull=True).update(
            attempt=F("attempt") + 1, lease_until=now + CHUNK_LEASE
        )
        if taken:
            chunk.attempt += 1
            return chunk


def keep_chunk(chunk: Chunk, figures: bytes, refused: Mapping[str, str]) -> bool:
    """Write a chunk's rows, once: an attempt that was overtaken changes nothing."""
    kept = Chunk.objects.filter(pk=chunk.pk, attempt=chunk.attempt, done_at__isnull=True).update(
        figures=figures, refused=dict(refused), done_at=timezone.now(), lease_until=None
    )
    return bool(kept)


def share_done(study: Study) -> float:
    done = sum(stop - start for start, stop in study.chunks.filter(done_at__isnull=False).values_list("start", "stop"))
    return done / study.choices


def columns_so_far(study: Study) -> tuple[work.Columns, dict[str, str]]:
    """Figures of every choice solved so far, NaN elsewhere, and the words for those refused."""
    pieces, refused = [], {}
    for chunk in study.chunks.filter(done_at__isnull=False):
        pieces.append((chunk.start, chunk.stop, work.unpacked(chunk.figures)))
        refused |= chunk.refused
    return work.joined(pieces, study.choices), refused


def set_yardstick(
    member: Membership, study: Study, version: int, limits: Mapping[str, Any], weights: Mapping[str, float]
) -> None:
    """What the study is ranked by; solving goes on untouched."""
    with transaction.atomic():
        changed = Study.objects.filter(pk=study.pk, version=version).update(
            limits=limits, weights=weights, version=version + 1
        )
        if not changed:
            raise Stale(Study.objects.get(pk=study.pk))
        record(member, "ranked", study)


def keep_yardstick(member: Membership, name: str, limits: Mapping[str, Any], weights: Mapping[str, float]) -> Yardstick:
    """Save limits and weights under a name for the shop's next study; the same name is written over."""
    if not name.strip():
        raise Refused({"name": "give the limits and weights a name"})
    with transaction.atomic():
        kept, _ = Yardstick.objects.update_or_create(
            shop=member.shop,
            name=name.strip()[:80],
            defaults={"limits": limits, "weights": weights, "author": member.user},
        )
        record(member, "kept", kept)
    return kept


def resume(member: Membership, study: Study) -> None:
    """Put a cancelled or failed study back in the queue; its solved chunks stay."""
    with transaction.atomic():
        back = Job.objects.filter(pk=study.job_id, state__in=[Job.CANCELLED, Job.FAILED]).update(
            state=Job.WAITING, cancel_requested=False, error="", lease_until=None, finished_at=None, sent_at=None
        )
        if not back:
            raise Refused(f"this study is {study.job.state}; there is nothing to take up again")
        study.chunks.filter(done_at__isnull=True).update(lease_until=None)
        record(member, "took up again", study)
        for _ in range(HELPERS):
            transaction.on_commit(lambda: send(study.job))

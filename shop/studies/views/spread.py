"""How sure the figures of a revision are, and what to measure again."""

from __future__ import annotations

from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.launches.models import Job
from shop.launches.services import queue
from shop.people.access import form_view
from shop.people.log import record
from shop.people.permissions import ISSUE
from shop.refusals import Refused
from shop.setups.models import Revision
from shop.studies.spread import bought, label_of, spread_input
from shop.studies.yardsticks import FIGURES, study_measure


@form_view(ISSUE)
def spread(request: HttpRequest, pk: int) -> HttpResponse:
    """The newest spread of the revision; sending the form works it out anew."""
    related = ("car", "survey__car", "parent", "shop")
    revision = get_object_or_404(Revision.objects.select_related(*related), pk=pk, number__isnull=False)
    if request.method == "POST":
        try:
            job = queue(request.member, revision, "sensitivity", spread_input(revision))
        except Refused as refused:
            return render(request, "studies/spread.html", {"revision": revision, "fault": str(refused)}, status=422)
        record(request.member, "asked how sure it is", revision, job=job.pk)
        return redirect("studies:spread", pk)
    job = Job.objects.filter(revision=revision, kind="sensitivity").select_related("result").order_by("-id").first()
    context = {"revision": revision, "car": revision.car, "job": job, "may_issue": request.member.may(ISSUE)}
    if job is not None and job.state == Job.DONE:
        context |= _found(job, revision, request.shop.units)
    return render(request, "studies/spread.html", context)


def _found(job: Job, revision: Revision, units: str) -> dict[str, object]:
    rows = []
    linkage = revision.survey.linkage
    for name in FIGURES:
        found = job.result.figures.get(name)
        if found is None:
            continue
        known = study_measure(name, units, linkage)
        total = found["uncertainty"] ** 2 or 1.0
        sources = [
            (
                label_of(part["key"]),
                f"{100 * part['part'] ** 2 / total:.0f}",
                job.input["tolerances"][part["key"]]["origin"],
            )
            for part in found["parts"][:4]
            if part["part"] ** 2 > 0.01 * total
        ]
        rows.append(
            {
                "measure": known,
                "text": known.text(found["value"]),
                "uncertainty": known.text(found["uncertainty"]),
                "sources": sources,
                "curved": found["curved"],
                "bought": known.text(bought(found)),
            }
        )
    return {"rows": rows, "refused": [(label_of(row["refused"]), row["words"]) for row in job.result.events]}

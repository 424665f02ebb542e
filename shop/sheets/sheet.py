"""Everything a setup sheet says of one issued revision, as finished text, short enough for one page."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

from django.utils.safestring import SafeString

from shop.drawing.side_view import side_view
from shop.launches import bridge
from shop.launches.figures import bar_rows, figure_row, happened, lifts
from shop.launches.models import Job
from shop.refusals import Refused
from shop.setups.car_file import inputs_of
from shop.setups.figures import corner_weights
from shop.setups.models import Revision
from shop.sheets.setting_lines import Line, setting_groups

PAPERS = {"letter": "US Letter", "a4": "A4"}
HISTORY = 6
ROOMY = 34  # lines that fit beside each other in the larger print
NOTES = 300  # characters

AT_REST = ("ic_x", "ic_z", "anti_squat", "anti_squat_dynamic")
ON_THE_HIT = ("peak_rear_load", "mean_rear_load_250ms", "peak_grip_needed", "front_lift_height", "peak_pitch", "rear_squat",
              "rear_separation", "peak_wheelie_bar_load")


@dataclass(frozen=True)
class Sheet:
    """One page. `solved` says how the launch stands when it has no figures."""

    revision: Revision
    groups: list[tuple[str, list[Line]]]
    corners: dict[str, str]
    weight_note: str
    figures: list[Line]
    solved: str
    lifts: bool
    provisional: list[str]
    history: list[Revision]
    earlier: int
    notes: str
    drawing: SafeString | str = ""
    fault: str = ""
    changed: int = field(default=0)

    @property
    def car_name(self) -> str:
        return str(self.revision.car)

    @property
    def dense(self) -> bool:
        """Whether it takes the smaller print to keep to one page: counted in lines of either half."""
        left = sum(len(lines) + 1 for _, lines in self.groups) + len(self.notes) // 60
        typical = sum(map(len, self.provisional)) // 60
        right = len(self.figures) + 6 + typical + sum(1 + len(one.reason[:76]) // 38 for one in self.history)
        return max(left, right) > ROOMY


def sheet_of(revision: Revision) -> Sheet:
    """The sheet of an issued revision, in its shop's units."""
    units = revision.shop.units
    job = revision.jobs.filter(kind="launch").select_related("result").order_by("-id").first()
    figures = job.result.figures if job is not None and job.state == Job.DONE else {}
    groups = setting_groups(revision, units)
    older = revision.car.revisions.filter(number__lte=revision.number).select_related("author").order_by("-number")
    weights = {row.key: row for row in corner_weights(inputs_of(revision), units)}
    return Sheet(
        revision=revision,
        groups=groups,
        corners={key: row.text for key, row in weights.items()},
        weight_note=weights["total"].note,
        figures=[*_at_rest(revision, units), *_on_the_hit(figures, units, revision.survey.linkage)],
        solved=_solved(job),
        lifts=lifts(figures),
        provisional=[quantity.label for quantity in bridge.provisional(revision)],
        history=list(older[:HISTORY]),
        earlier=max(older.count() - HISTORY, 0),
        notes=revision.notes if len(revision.notes) <= NOTES else f"{revision.notes[:NOTES]}… (the rest is on its page)",
        changed=sum(line.changed for _, lines in groups for line in lines),
        **_drawing(revision),
    )


def _at_rest(revision: Revision, units: str) -> list[Line]:
    rows = bridge.static_rows(bridge.statics_of(revision), units)
    return [Line(row.label, row.text) for row in rows if row.key in AT_REST]


def _on_the_hit(figures: dict[str, Any], units: str, linkage: str) -> list[Line]:
    rows = [figure_row(key, figures, units, linkage) for key in ON_THE_HIT if happened(key, figures)]
    rows += bar_rows(figures, units, linkage)
    lines = [Line(row.label, f"{row.text} {row.when}".strip()) for row in rows]
    if figures and not happened("front_lift_height", figures):
        lines.append(Line("Front wheel lift", "none: the tyres stay down"))
    return lines


def _solved(job: Job | None) -> str:
    if job is None:
        return "Its launch was never asked for: figures on the hit are missing."
    if job.state == Job.DONE:
        return ""
    if job.state == Job.FAILED:
        return f"Its launch could not be solved: {job.error[:160]}"
    if job.state == Job.CANCELLED:
        return "Its launch was cancelled: figures on the hit are missing."
    return "Its launch is not solved yet: figures on the hit are missing. Print the sheet again when it is."


def _drawing(revision: Revision) -> dict[str, Any]:
    try:
        return {"drawing": side_view(bridge.scene_of(revision, revision.holes), mode="paper")}
    except Refused as refused:
        return {"fault": str(refused)}

"""The page a tuner and a racer sit over on Monday: what was changed, in what air, what it did, what was foreseen."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from statistics import median

from shop.garage.models import Car
from shop.launches import bridge
from shop.launches.models import Job, Result
from shop.setups.differences import Change, hole_changes, setting_changes, survey_changes
from shop.setups.models import Revision
from shop.track.comparing import Statement, compare
from shop.track.figures import BY_KEY
from shop.track.groups import BY_BOTH, Question, group
from shop.track.models import Pass, WeatherReading, Weekend
from shop.track.quantities import text_of
from shop.track.slip import COLUMNS, TIMES, Column
from shop.track.slip_rows import SlipRow, slip_row, when_text
from shop.units import default_unit, show

COMPARED = ("time_60", "from_60_to_330", "time_1320")


@dataclass(frozen=True)
class PassLine:
    """One pass as a line of the table: under each column its figure as run, and corrected."""

    when: str
    row: SlipRow
    cells: list[tuple[str, str]]


@dataclass(frozen=True)
class WeekendPart:
    """One weekend of one car: its conditions and passes, with only the columns that some slip fills."""

    weekend: Weekend
    elevation: str
    air: str
    counts: str
    columns: list[str]
    lines: list[PassLine]

    @property
    def width(self) -> int:
        """Columns a note under a pass may span."""
        return len(self.columns) + 3


@dataclass(frozen=True)
class Marked:
    """One mark of one revision: foreseen against measured."""

    label: str
    simulated: str
    measured: str
    passes: str
    difference: str


@dataclass(frozen=True)
class RevisionPart:
    """One revision that ran: what it changed on the one before, what its launch foresaw, what it did."""

    revision: Revision
    before: Revision | None
    changes: list[Change]
    launch: str
    foreseen: list[tuple[str, str]]
    marks: list[Marked]
    reach: str


@dataclass(frozen=True)
class Monday:
    weekends: list[WeekendPart]
    revisions: list[RevisionPart]
    statements: list[Statement]
    left_out: list[str]

    @property
    def revision_numbers(self) -> str:
        return ", ".join(str(part.revision.number) for part in self.revisions) or "none"

    @property
    def how(self) -> str:
        """How the intervals were made: said once for all of them."""
        said: list[tuple[str, ...]] = [statement.how for statement in self.statements]
        return " ".join(max(said, key=lambda how: len(how), default=()))


def monday(car: Car, weekends: Sequence[Weekend], station: dict[int, list[WeatherReading]], units: str) -> Monday:
    """Everything of `car` on `weekends`, in order of time."""
    chosen = sorted(weekends, key=lambda weekend: (weekend.starts_on, weekend.pk))
    runs = list(
        Pass.objects.filter(car=car, weekend__in=chosen)
        .select_related("car", "weekend", "revision__survey", "revision__parent__survey")
    )
    parts = [_weekend(weekend, [run for run in runs if run.weekend_id == weekend.pk], station, units) for weekend in chosen]
    statements, left_out = _statements(runs, station, units)
    return Monday(parts, _revisions(runs, units), statements, left_out)


def _weekend(weekend: Weekend, runs: list[Pass], station: dict[int, list[WeatherReading]], units: str) -> WeekendPart:
    rows = [slip_row(run, station.get(weekend.pk, []), units) for run in runs]
    aborted = sum(run.aborted for run in runs)
    counts = f"{len(runs)} pass{'' if len(runs) == 1 else 'es'}" + (f", {aborted} aborted" if aborted else "")
    filled = [i for i, column in enumerate(COLUMNS) if any(getattr(run, column.field) is not None for run in runs)]
    speeds = {run.speed_unit for run in runs}
    lines = [
        PassLine(when_text(row.run), row, [_cell(row, i, COLUMNS[i], len(speeds) > 1) for i in filled]) for row in rows
    ]
    return WeekendPart(
        weekend, text_of(weekend.elevation), _air_words(rows), counts, [_header(COLUMNS[i], speeds) for i in filled], lines
    )


def _cell(row: SlipRow, i: int, column: Column, mixed: bool) -> tuple[str, str]:
    cell = row.cells[i]
    with_unit = column.kind == "speed" and mixed
    return (cell.raw, cell.corrected) if with_unit else (cell.bare, cell.bare_corrected)


def _header(column: Column, speeds: set[str]) -> str:
    if column.kind != "speed":
        return f"{column.label}, s"
    return f"{column.mark}, {speeds.copy().pop()}" if len(speeds) == 1 else f"{column.mark}, speed"


def _air_words(rows: list[SlipRow]) -> str:
    known = [row.air for row in rows if not row.air.missing]
    if not known:
        return "not known"
    if len(known) == 1:
        return f"{known[0].density_altitude} ({known[0].conditions})"
    first, last = known[0], known[-1]
    return (
        f"{first.density_altitude} on the first pass ({first.conditions}),"
        f" {last.density_altitude} on the last ({last.conditions})"
    )


def _revisions(runs: Sequence[Pass], units: str) -> list[RevisionPart]:
    used: dict[int, Revision] = {}
    for run in runs:
        if run.revision:
            used.setdefault(run.revision.pk, run.revision)
    parts = []
    before: Revision | None = None
    for revision in used.values():
        # The first one on the page is told against what it came from.
        earlier = before or revision.parent
        changes = []
        if earlier and earlier.pk != revision.pk:
            changes = [*hole_changes(earlier, revision), *setting_changes(earlier, revision),
                       *survey_changes(earlier.survey, revision.survey)]
        job = revision.jobs.filter(kind="launch").select_related("result").order_by("-id").first()
        result = job.result if job is not None and job.state == Job.DONE else None
        slip = bridge.slip_of_run(result.histories if result else {})
        parts.append(RevisionPart(
            revision, earlier, changes, _launch_words(job), _foreseen(result, units) if result else [],
            _marks(revision, runs, slip.times), _reach(slip, units),
        ))
        before = revision
    return parts


def _launch_words(job: Job | None) -> str:
    if job is None:
        return "No launch of this revision has been asked for."
    if job.state == Job.DONE:
        return ""
    return {Job.FAILED: "Its launch failed.", Job.CANCELLED: "Its launch was cancelled."}.get(
        job.state, "Its launch is not solved yet."
    )


def _foreseen(result: Result, units: str) -> list[tuple[str, str]]:
    """What the launch says where no slip can speak: figures at rest and on the hit."""
    force = default_unit("force", units)
    anti_squat, figures = result.statics.get("anti_squat"), result.figures
    rows = [
        ("Anti-squat, whole car", "—" if anti_squat is None else f"{anti_squat:.1f} %".replace("-", "−")),
        ("Peak load on the rear tyres, both", show(figures.get("peak_rear_load"), "force", force)),
    ]
    lift = figures.get("front_lift_time")
    rows.append(("Front tyres leave the ground", "they stay down" if lift is None else show(lift, "time", "s")))
    return rows


def _marks(revision: Revision, runs: Sequence[Pass], simulated: dict[str, float]) -> list[Marked]:
    rows = []
    for column in TIMES:
        values = [
            float(value) for run in runs
            if run.revision_id == revision.pk and run.counts_to(column.field)
            and (value := getattr(run, column.field)) is not None
        ]
        foreseen = simulated.get(column.mark)
        if not values and foreseen is None:
            continue
        middle = median(values) if values else None
        rows.append(Marked(
            column.label,
            "—" if foreseen is None else f"{foreseen:.3f} s",
            "—" if middle is None else f"{middle:.3f} s",
            f"{len(values)}, best {min(values):.3f}" if values else "",
            "—" if middle is None or foreseen is None else f"{middle - foreseen:+.3f} s".replace("-", "−"),
        ))
    return rows


def _reach(slip: bridge.RunSlip, units: str) -> str:
    """How far the launch itself went, where that is short of 60 ft."""
    if slip.continued_from is None:
        return ""
    unit = default_unit("distance", units)
    ran = show(slip.continued_from, "distance", unit, decimals=0)
    return f"The launch ends at {ran}; to 60 ft it is continued at its last pull."


def _statements(
    runs: list[Pass], station: dict[int, list[WeatherReading]], units: str
) -> tuple[list[Statement], list[str]]:
    """Each revision on each weekend against the one before it, for the figures that say most."""
    statements: list[Statement] = []
    left_out: list[str] = []
    asked = []
    for key in COMPARED:
        question = Question(BY_KEY[key], units, by=BY_BOTH)
        grouped = group(runs, station, question)
        asked += [(b, a, question) for a, b in zip(grouped.groups, grouped.groups[1:], strict=False)]
        left_out += [f"{BY_KEY[key].label}: {words}" for words in grouped.left_out]
    for later, earlier, question in asked:
        statements.append(compare(later, earlier, question, len(asked)))
    return statements, left_out

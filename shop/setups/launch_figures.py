"""The figures of two launches beside each other, in the shop's units. Says what differs, never which is better."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from shop.launches.figures import GROUPS, REST, WHEN, figure_row, happened
from shop.launches.measures import LAUNCH_FIGURES, measure

Solved = Mapping[str, float | None]


@dataclass(frozen=True)
class Pair:
    """One figure of launch a and launch b; "did not happen" where it did not."""

    key: str
    label: str
    description: str
    a: str
    b: str
    difference: str = ""


def pairs_of(a: Solved, b: Solved, units: str, linkage: str) -> list[tuple[str, list[Pair]]]:
    """Under each of the launch page's headings, every figure that happened in one launch or the other."""
    placed = {key for keys in GROUPS.values() for key in keys}
    others = [key for key in LAUNCH_FIGURES if key not in placed and not _is_when(key)]
    groups = []
    for title, keys in {**GROUPS, REST: others}.items():
        pairs = [_pair(key, a, b, units, linkage) for key in keys if happened(key, a) or happened(key, b)]
        if pairs:
            groups.append((title, pairs))
    return groups


def _is_when(key: str) -> bool:
    # A peak's time is shown with the peak.
    return key.endswith(WHEN) and key.removesuffix(WHEN) in LAUNCH_FIGURES


def _pair(key: str, a: Solved, b: Solved, units: str, linkage: str) -> Pair:
    rows = [figure_row(key, figures, units, linkage) for figures in (a, b)]
    texts = [
        f"{row.text} {row.when}".strip() if happened(key, figures) else "did not happen"
        for row, figures in zip(rows, (a, b), strict=True)
    ]
    difference = ""
    before, after = a.get(key), b.get(key)
    if before is not None and after is not None and rows[0].text != rows[1].text:
        difference = measure(key, units, linkage).difference(after - before)
    return Pair(key, rows[1].label, rows[1].description, *texts, difference)

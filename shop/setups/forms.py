"""The revision form: every hole, setting and the hit, read as typed; faults stay beside their fields."""

from __future__ import annotations

from typing import Any

from django import forms

from shop.garage.quantities import BRACKETS
from shop.garage.quantities import BY_KEY as SURVEY_KEYS
from shop.people.models import Shop
from shop.refusals import Refused
from shop.setups.choices import Choices, Setting, Surveyed
from shop.setups.hit_lines import parse_hit_lines
from shop.setups.models import Revision
from shop.setups.quantities import BY_KEY, HIT_FORCE, QUANTITIES, read_setting, units_for
from shop.units import DIMENSIONS, ReadingError, default_unit

BY_PEAK, BY_TABLE = "peak", "table"
HIT_FIELDS = ("hit_peak", "hit_rise")
REASON_NEEDED = "say what this revision changes, and why: it goes on the sheet"


class RevisionForm(forms.Form):
    """Fields are named by their keys: bracket places for holes, setting keys for values, `<key>_unit` for units."""

    version = forms.IntegerField(required=False, min_value=1, widget=forms.HiddenInput)
    newest = forms.IntegerField(required=False, min_value=0, widget=forms.HiddenInput)
    hit_kind = forms.ChoiceField(choices=[(BY_PEAK, "peak and rise time"), (BY_TABLE, "table of force over time")])
    hit_lines = forms.CharField(required=False, max_length=4000, widget=forms.Textarea)
    hit_lines_unit = forms.ChoiceField(choices=[(unit, unit) for unit in DIMENSIONS["force"]])
    reason = forms.CharField(required=False, max_length=200)
    notes = forms.CharField(required=False, max_length=4000, widget=forms.Textarea)

    def __init__(self, data: Any = None, *, surveyed: Surveyed, shop: Shop, **more: Any) -> None:
        super().__init__(data, **more)
        self.surveyed = surveyed
        self.shop = shop
        for place in surveyed.hole_counts:
            self.fields[place] = forms.CharField(required=False, max_length=20)
        for quantity in QUANTITIES:
            self.fields[quantity.key] = forms.CharField(required=False, max_length=200)
            self.fields[f"{quantity.key}_unit"] = forms.CharField(required=False, max_length=20)
        self.readable = Choices({}, {})
        self.refused = False

    def clean(self) -> dict[str, Any]:
        cleaned = super().clean() or {}
        holes = {place: self._hole(place, count) for place, count in self.surveyed.hole_counts.items()}
        settings = {quantity.key: self._setting(quantity.key) for quantity in QUANTITIES}
        table = self._table()
        # Kept also beside faults: the page marks what changed while one field is still half typed.
        self.readable = Choices(
            {place: hole for place, hole in holes.items() if hole is not None},
            {key: setting for key, setting in settings.items() if setting is not None},
            table,
            cleaned.get("hit_lines", ""),
            cleaned.get("hit_lines_unit", ""),
            cleaned.get("reason", ""),
            cleaned.get("notes", ""),
        )
        return cleaned

    @property
    def choices(self) -> Choices | None:
        return self.readable if self.is_valid() else None

    def _hole(self, place: str, count: int) -> int | None:
        typed = self.cleaned_data.get(place, "").strip()
        if count == 0:
            self.add_error(place, f"{BRACKETS[place]}: the survey has no holes for it; measure them first")
        elif not typed:
            self.add_error(place, f"choose one of the holes 1 to {count}")
        elif not typed.isdecimal() or not 1 <= int(typed) <= count:
            self.add_error(place, f"the bracket has holes 1 to {count}; “{typed}” is not one of them")
        else:
            return int(typed)
        return None

    def _setting(self, key: str) -> Setting | None:
        typed = self.cleaned_data.get(key, "").strip()
        if not typed:
            needed = not BY_KEY[key].optional and not (key in HIT_FIELDS and self.by_table)
            if needed and key not in self.errors:
                self.add_error(key, f"{BY_KEY[key].label} must be set")
            return None
        unit = self.cleaned_data.get(f"{key}_unit") or self.unit_of(key)
        try:
            return self.surveyed.as_setting(key, read_setting(key, typed, unit))
        except ReadingError as error:
            self.add_error(key, str(error))
        return None

    def _table(self) -> list[list[float]] | None:
        if not self.by_table:
            return None
        try:
            return parse_hit_lines(self.cleaned_data.get("hit_lines", ""), self.cleaned_data.get("hit_lines_unit", "N"))
        except ReadingError as error:
            self.add_error("hit_lines", str(error))
        return None

    @property
    def can_be_drawn(self) -> bool:
        """Not once the solver has refused these very choices."""
        return not self.is_bound or not self.refused

    @property
    def by_table(self) -> bool:
        return self["hit_kind"].value() == BY_TABLE

    def unit_of(self, key: str) -> str:
        """The unit that stands beside a field: as sent, as stored, else the shop's own."""
        unit = self[f"{key}_unit"].value()
        return unit if unit in units_for(key) else default_unit(BY_KEY[key].dimension, self.shop.units)

    def need_reason(self) -> None:
        if not self.cleaned_data.get("reason", "").strip():
            self.add_error("reason", REASON_NEEDED)

    def add_refusal(self, refused: Refused) -> None:
        """Put a service's or the solver's words beside their fields; what has no field here goes on top."""
        self.refused = True
        for name, words in refused.faults.items():
            field = HIT_FORCE.key if name == "hit" else name
            if field == "hit_peak" and self.by_table:
                field = "hit_lines"
            if field in self.fields:
                self.add_error(field, words)
            else:
                label = SURVEY_KEYS[name].label if name in SURVEY_KEYS else BRACKETS.get(name, "")
                self.add_error(None, f"In the survey, {label}: {words}" if label else words)


def initial_of(choices: Choices, shop: Shop) -> dict[str, Any]:
    """What the form shows for choices already made."""
    initial: dict[str, Any] = {**choices.holes}
    for key, setting in choices.settings.items():
        initial[key] = setting["typed"]
        initial[f"{key}_unit"] = setting["unit"]
    initial["hit_kind"] = BY_TABLE if choices.hit_table else BY_PEAK
    initial["hit_lines"] = choices.hit_lines
    initial["hit_lines_unit"] = choices.hit_lines_unit or default_unit("force", shop.units)
    return {**initial, "reason": choices.reason, "notes": choices.notes}


def form_of(revision: Revision, shop: Shop, data: Any = None, **hidden: int) -> RevisionForm:
    """The form of a (possibly unsaved) revision, bound when `data` was sent."""
    initial = {**initial_of(Choices.of(revision), shop), **hidden}
    return RevisionForm(data, surveyed=Surveyed.of(revision.survey), shop=shop, initial=initial)

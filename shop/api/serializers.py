"""What the API shows of each row. Values appear as they were typed and in SI side by side."""

from __future__ import annotations

from typing import Any

from drf_spectacular.utils import extend_schema_field
from rest_framework import serializers

from shop.garage.models import Bracket, Car, Customer, Measurement, Survey
from shop.launches.models import Job
from shop.parts.models import Part, PartVersion
from shop.setups.car_file import setting_si
from shop.setups.models import Revision
from shop.setups.quantities import BY_KEY
from shop.studies.models import Study
from shop.track.models import Pass, Weekend


class CustomerSerializer(serializers.ModelSerializer):
    class Meta:
        model = Customer
        fields = ["id", "name", "phone", "email", "notes", "version", "created_at", "archived_at"]


class CarSerializer(serializers.ModelSerializer):
    class Meta:
        model = Car
        fields = [
            "id", "customer", "name", "racing_number", "race_class", "chassis", "notes", "version", "created_at",
            "archived_at",
        ]


class MeasurementSerializer(serializers.ModelSerializer):
    si = serializers.FloatField(read_only=True)
    si_tolerance = serializers.FloatField(read_only=True)

    class Meta:
        model = Measurement
        fields = ["key", "typed", "value", "unit", "tolerance", "origin", "si", "si_tolerance", "taken_at"]


class BracketSerializer(serializers.ModelSerializer):
    class Meta:
        model = Bracket
        fields = ["place", "entry", "unit", "tolerance", "origin", "row", "holes"]


class SurveySerializer(serializers.ModelSerializer):
    measurements = MeasurementSerializer(many=True, read_only=True)
    brackets = BracketSerializer(many=True, read_only=True)
    locked = serializers.BooleanField(read_only=True)

    class Meta:
        model = Survey
        fields = [
            "id", "car", "number", "linkage", "taken_on", "notes", "parent", "fitted", "locked", "version", "created_at",
            "measurements", "brackets",
        ]


class RevisionSerializer(serializers.ModelSerializer):
    """A revision; `si` repeats its settings in SI, and `launch` is the newest job that solved it."""

    author = serializers.CharField(source="author.name", read_only=True)
    si = serializers.SerializerMethodField()
    launch = serializers.SerializerMethodField()

    class Meta:
        model = Revision
        fields = [
            "id", "car", "survey", "parent", "number", "label", "issued", "author", "reason", "notes", "holes",
            "settings", "si", "hit_table", "launch", "version", "created_at", "issued_at",
        ]

    def get_si(self, revision: Revision) -> dict[str, float]:
        return {key: setting_si(key, setting) for key, setting in revision.settings.items() if key in BY_KEY}

    def get_launch(self, revision: Revision) -> int | None:
        jobs = [job.pk for job in revision.jobs.all() if job.kind == "launch"]
        return max(jobs, default=None)


class JobSerializer(serializers.ModelSerializer):
    class Meta:
        model = Job
        fields = [
            "id", "kind", "revision", "state", "progress", "attempt", "error", "solver_version", "input_hash",
            "created_at", "started_at", "finished_at",
        ]


class WeekendSerializer(serializers.ModelSerializer):
    class Meta:
        model = Weekend
        fields = ["id", "place", "starts_on", "ends_on", "elevation", "surface", "notes", "version", "created_at"]


class PassSerializer(serializers.ModelSerializer):
    """A pass as entered: times in seconds, speeds in `speed_unit`, readings as typed."""

    class Meta:
        model = Pass
        exclude = ["shop", "entered_by", "entry_key"]


class StudySerializer(serializers.ModelSerializer):
    state = serializers.CharField(source="job.state", read_only=True)
    progress = serializers.FloatField(source="job.progress", read_only=True)

    class Meta:
        model = Study
        fields = [
            "id", "revision", "job", "name", "plan", "choices", "limits", "weights", "state", "progress", "created_at",
        ]


class PartSerializer(serializers.ModelSerializer):
    """A part with every version of what is known of it; `data` is as entered, curves in SI."""

    class VersionSerializer(serializers.ModelSerializer):
        class Meta:
            model = PartVersion
            fields = ["id", "number", "data", "origin", "dated", "notes", "created_at"]

    versions = VersionSerializer(many=True, read_only=True)

    class Meta:
        model = Part
        fields = ["id", "kind", "name", "versions", "created_at", "archived_at"]


@extend_schema_field({"oneOf": [{"type": "string"}, {"type": "number"}, {"type": "object"}]})
class SettingField(serializers.Field):
    """A setting as a person types it ("165 lb/in"), a number in the shop's unit, or {"typed", "unit"}."""

    def to_internal_value(self, data: Any) -> tuple[str, str]:
        if isinstance(data, dict):
            return str(data.get("typed", "")), str(data.get("unit", ""))
        if isinstance(data, (str, int, float)) and not isinstance(data, bool):
            return str(data), ""
        raise serializers.ValidationError('write a value such as "165 lb/in", 165, or {"typed": "165", "unit": "lb/in"}')

    def to_representation(self, value: Any) -> Any:
        return value


class NewRevisionSerializer(serializers.Serializer):
    """What is sent to make a revision: what it changes on its parent, and why."""

    survey = serializers.IntegerField(required=False, min_value=1, help_text="Default: the car's newest survey.")
    parent = serializers.IntegerField(required=False, min_value=1, help_text="Default: the car's newest issued revision.")
    holes = serializers.DictField(child=serializers.IntegerField(), required=False)
    settings = serializers.DictField(child=SettingField(), required=False)
    hit_lines = serializers.CharField(required=False, allow_blank=True, max_length=4000, help_text="`seconds force` a line.")
    hit_lines_unit = serializers.CharField(required=False, max_length=8)
    reason = serializers.CharField(max_length=200)
    notes = serializers.CharField(required=False, allow_blank=True, max_length=4000)
    issue = serializers.BooleanField(default=False, help_text="Freeze it and queue its launch.")


class FaultsSerializer(serializers.Serializer):
    """A refusal: words for each field at fault; `form` for the whole."""

    form = serializers.ListField(child=serializers.CharField(), required=False)

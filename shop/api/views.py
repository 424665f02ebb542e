"""Rows of the signed-in shop over REST. Another shop's row is not found; writes go through the same
forms and services as the pages, and are refused in the same words."""

from __future__ import annotations

from typing import Any

from django.core.exceptions import PermissionDenied
from django.db.models import Prefetch, QuerySet
from django.shortcuts import get_object_or_404
from drf_spectacular.utils import OpenApiTypes, extend_schema
from rest_framework import mixins, status, viewsets
from rest_framework.decorators import action
from rest_framework.request import Request
from rest_framework.response import Response

from shop.api.serializers import (
    CarSerializer,
    CustomerSerializer,
    FaultsSerializer,
    JobSerializer,
    NewRevisionSerializer,
    PartSerializer,
    PassSerializer,
    RevisionSerializer,
    StudySerializer,
    SurveySerializer,
    WeekendSerializer,
)
from shop.garage.models import Car, Customer, Survey
from shop.launches import bridge
from shop.launches.models import Job
from shop.parts.models import Part
from shop.people.permissions import ISSUE
from shop.refusals import Refused, Stale
from shop.setups import services
from shop.setups.forms import RevisionForm, form_of
from shop.setups.models import Revision
from shop.studies.models import Study
from shop.track.models import Pass, Weekend

ReadOnly = viewsets.ReadOnlyModelViewSet


class CustomerViewSet(ReadOnly):
    serializer_class = CustomerSerializer
    filterset_fields = ["name"]

    def get_queryset(self) -> QuerySet[Customer]:
        return Customer.objects.all()


class CarViewSet(ReadOnly):
    serializer_class = CarSerializer
    filterset_fields = ["customer", "name"]

    def get_queryset(self) -> QuerySet[Car]:
        return Car.objects.all()


class SurveyViewSet(ReadOnly):
    serializer_class = SurveySerializer
    filterset_fields = ["car", "linkage"]

    def get_queryset(self) -> QuerySet[Survey]:
        return Survey.objects.prefetch_related("measurements", "brackets")


class RevisionViewSet(ReadOnly):
    serializer_class = RevisionSerializer
    filterset_fields = ["car", "number", "parent"]

    def get_queryset(self) -> QuerySet[Revision]:
        jobs = Prefetch("jobs", Job.objects.only("id", "kind", "revision_id"))
        return Revision.objects.select_related("author").prefetch_related(jobs)

    @extend_schema(responses={200: OpenApiTypes.OBJECT})
    @action(detail=True, url_path="car-file")
    def car_file(self, request: Request, pk: str) -> Response:
        """The solver's input: frozen when issued, worked out anew for a draft."""
        revision = get_object_or_404(Revision.objects.select_related("survey", "car"), pk=pk)
        try:
            return Response(revision.car_file or bridge.check(revision))
        except Refused as refused:
            return _refusal(refused)


class JobViewSet(mixins.RetrieveModelMixin, mixins.ListModelMixin, viewsets.GenericViewSet):
    serializer_class = JobSerializer
    filterset_fields = ["revision", "state", "kind"]

    def get_queryset(self) -> QuerySet[Job]:
        return Job.objects.all()

    @extend_schema(responses={200: OpenApiTypes.OBJECT, 409: FaultsSerializer})
    @action(detail=True)
    def result(self, request: Request, pk: str) -> Response:
        """Statics, modes, figures, events and histories in SI, as the solver's command line writes them."""
        job = get_object_or_404(Job.objects.select_related("result"), pk=pk)
        if job.state != Job.DONE or not hasattr(job, "result"):
            words = job.error or f"this job is {job.state}; it has no result"
            return Response({"form": [words]}, status=status.HTTP_409_CONFLICT)
        names = ("statics", "modes", "figures", "events", "histories")
        return Response({name: getattr(job.result, name) for name in names})


class WeekendViewSet(ReadOnly):
    serializer_class = WeekendSerializer
    filterset_fields = ["place", "starts_on"]

    def get_queryset(self) -> QuerySet[Weekend]:
        return Weekend.objects.order_by("-starts_on", "-id")


class PassViewSet(ReadOnly):
    serializer_class = PassSerializer
    filterset_fields = ["weekend", "car", "revision", "aborted"]

    def get_queryset(self) -> QuerySet[Pass]:
        return Pass.objects.order_by("-day", "-id")


class StudyViewSet(ReadOnly):
    serializer_class = StudySerializer
    filterset_fields = ["revision"]

    def get_queryset(self) -> QuerySet[Study]:
        return Study.objects.select_related("job").defer("job__input")


class PartViewSet(ReadOnly):
    serializer_class = PartSerializer
    filterset_fields = ["kind", "name"]

    def get_queryset(self) -> QuerySet[Part]:
        return Part.objects.prefetch_related("versions")


class CarRevisionsViewSet(viewsets.GenericViewSet):
    """Making revisions of one car."""

    serializer_class = NewRevisionSerializer

    @extend_schema(responses={201: RevisionSerializer, 400: FaultsSerializer, 409: FaultsSerializer})
    def create(self, request: Request, car_id: int) -> Response:
        car = get_object_or_404(Car, pk=car_id)
        sent = NewRevisionSerializer(data=request.data)
        sent.is_valid(raise_exception=True)
        member = request._request.member
        if sent.validated_data["issue"] and not member.may(ISSUE):
            raise PermissionDenied
        try:
            draft = services.new_revision(member, car, _survey(car, sent), _parent(car, sent))
            form = _form(draft, member.shop, sent.validated_data)
            if not form.is_valid():
                return Response(_by_field(form), status=status.HTTP_400_BAD_REQUEST)
            revision = services.start_draft(member, car, draft.survey, draft.parent, form.readable)
            if sent.validated_data["issue"]:
                revision = _issue_or_discard(member, revision)
        except Refused as refused:
            return _refusal(refused)
        return Response(RevisionSerializer(revision).data, status=status.HTTP_201_CREATED)


def _issue_or_discard(member: Any, draft: Revision) -> Revision:
    # A caller cannot come back to a half-finished form, so a refused issue leaves nothing behind.
    try:
        return services.issue(member, draft, draft.version)
    except (Refused, Stale):
        services.discard_draft(member, draft, draft.version)
        raise


def _survey(car: Car, sent: NewRevisionSerializer) -> Survey:
    asked = sent.validated_data.get("survey")
    if asked:
        return get_object_or_404(car.surveys, pk=asked)
    newest = car.surveys.order_by("-number").first()
    if newest is None:
        raise Refused({"survey": "this car has not been measured yet"})
    return newest


def _parent(car: Car, sent: NewRevisionSerializer) -> Revision | None:
    issued = car.revisions.filter(number__isnull=False)
    asked = sent.validated_data.get("parent")
    return get_object_or_404(issued, pk=asked) if asked else issued.order_by("-number").first()


def _form(draft: Revision, shop: Any, sent: dict[str, Any]) -> RevisionForm:
    """The page's own form, holding what the draft starts from with what was sent on top."""
    start = form_of(draft, shop)
    data = {name: value for name, value in start.initial.items() if value is not None}
    data |= {"reason": sent["reason"], "notes": sent.get("notes", "")}
    data |= {place: str(number) for place, number in sent.get("holes", {}).items()}
    for key, (typed, unit) in sent.get("settings", {}).items():
        data[key] = typed
        data[f"{key}_unit"] = unit or data.get(f"{key}_unit", "")
    if sent.get("hit_lines"):
        data |= {"hit_kind": "table", "hit_lines": sent["hit_lines"]}
        data |= {"hit_lines_unit": sent.get("hit_lines_unit") or data.get("hit_lines_unit", "N")}
    form = form_of(draft, shop, data)
    known = set(form.fields)
    unknown = [name for name in (*sent.get("holes", {}), *sent.get("settings", {})) if name not in known]
    if unknown:
        raise Refused({name: f"“{name}” is not something a revision of this car sets" for name in unknown})
    return form


def _by_field(form: RevisionForm) -> dict[str, list[str]]:
    return {("form" if name == "__all__" else name): list(words) for name, words in form.errors.items()}


def _refusal(refused: Refused) -> Response:
    faults = {name or "form": [words] for name, words in refused.faults.items()}
    return Response(faults, status=status.HTTP_400_BAD_REQUEST)

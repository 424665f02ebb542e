"""The queue: a job row is the truth, the broker only carries its id."""

from __future__ import annotations

from django.conf import settings
from django.db import models
from django.db.models import Q
from django_scopes import ScopedManager

from shop.people.models import Shop
from shop.setups.models import Revision


class Job(models.Model):
    """One piece of work. `attempt` counts claims; only the current attempt may write the result."""

    WAITING, RUNNING, DONE, FAILED, CANCELLED = "waiting", "running", "done", "failed", "cancelled"
    STATES = (WAITING, RUNNING, DONE, FAILED, CANCELLED)
    KINDS = ("launch", "study", "aim", "sensitivity", "fit")

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    kind = models.CharField(max_length=12, choices=[(kind, kind) for kind in KINDS], default="launch")
    revision = models.ForeignKey(Revision, on_delete=models.PROTECT, related_name="jobs")
    requested_by = models.ForeignKey(settings.AUTH_USER_MODEL, on_delete=models.SET_NULL, null=True)
    state = models.CharField(max_length=10, default=WAITING, choices=[(state, state) for state in STATES])
    input = models.JSONField()
    input_hash = models.CharField(max_length=64, db_index=True)
    progress = models.FloatField(default=0.0)
    attempt = models.PositiveIntegerField(default=0)
    lease_until = models.DateTimeField(null=True, blank=True)
    worker = models.CharField(max_length=120, blank=True)
    error = models.TextField(blank=True)
    cancel_requested = models.BooleanField(default=False)
    solver_version = models.CharField(max_length=20, blank=True)
    created_at = models.DateTimeField(auto_now_add=True)
    sent_at = models.DateTimeField(null=True, blank=True)
    started_at = models.DateTimeField(null=True, blank=True)
    finished_at = models.DateTimeField(null=True, blank=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["-id"]
        indexes = [models.Index(fields=["state", "lease_until"])]
        constraints = [
            models.CheckConstraint(
                condition=Q(state__in=["waiting", "running", "done", "failed", "cancelled"]), name="job_state_known"
            ),
            models.CheckConstraint(condition=Q(progress__gte=0) & Q(progress__lte=1), name="job_progress_share"),
            models.CheckConstraint(condition=~Q(state="failed") | ~Q(error=""), name="job_failed_says_why"),
            models.CheckConstraint(
                condition=~Q(state="running") | Q(lease_until__isnull=False), name="job_running_is_leased"
            ),
        ]

    def __str__(self) -> str:
        return f"{self.kind} of {self.revision}"

    @property
    def settled(self) -> bool:
        return self.state in (self.DONE, self.FAILED, self.CANCELLED)


class Result(models.Model):
    """What a job computed; one per job, whatever dies. All values SI."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    job = models.OneToOneField(Job, on_delete=models.CASCADE, related_name="result")
    attempt = models.PositiveIntegerField()
    statics = models.JSONField(default=dict)
    modes = models.JSONField(default=list)
    figures = models.JSONField(default=dict)
    events = models.JSONField(default=list)
    histories = models.JSONField(default=dict)
    created_at = models.DateTimeField(auto_now_add=True)

    objects = ScopedManager(shop="shop")

    def __str__(self) -> str:
        return f"result of {self.job}"

"""Pages that no app owns: too large, shut out, and the one that says the application is well."""

from __future__ import annotations

from typing import Any

from django.conf import settings
from django.db import connection
from django.http import HttpRequest, HttpResponse, JsonResponse
from django.shortcuts import render
from django.template.loader import render_to_string


def megabytes(count: int) -> str:
    return f"{count / 1024 / 1024:,.1f} MB"


def too_large_words(announced: int | None = None) -> str:
    sent = "What was sent" if announced is None else f"What was sent ({megabytes(announced)})"
    return (
        f"{sent} is larger than the {megabytes(settings.UPLOAD_LIMIT)} accepted at once, and none of it was read. "
        "Nothing was changed. Send a smaller file, such as only the pass in question."
    )


def too_large_page(announced: int | None = None) -> str:
    return render_to_string("errors/too_large.html", {"words": too_large_words(announced)})


def shut_out(request: HttpRequest, response: HttpResponse | None = None, *args: Any, **kwargs: Any) -> HttpResponse:
    """What a person sees after too many wrong passwords."""
    minutes = round(settings.AXES_COOLOFF_TIME * 60)
    return render(request, "errors/shut_out.html", {"minutes": minutes}, status=429)


def health(request: HttpRequest) -> JsonResponse:
    """Whether the application and its database answer; used by the supervisor and by the containers."""
    with connection.cursor() as cursor:
        cursor.execute("SELECT 1")
    return JsonResponse({"well": True})

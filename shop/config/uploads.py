"""Refuses what is too large before a byte of it is read."""

from __future__ import annotations

from collections.abc import Callable

from django.conf import settings
from django.http import HttpRequest, HttpResponse, JsonResponse

from shop.config.pages import too_large_page, too_large_words

Respond = Callable[[HttpRequest], HttpResponse]


class UploadLimitMiddleware:
    """Answers 413, in words, to a request whose announced length is over the limit."""

    def __init__(self, get_response: Respond) -> None:
        self.get_response = get_response

    def __call__(self, request: HttpRequest) -> HttpResponse:
        announced = request.META.get("CONTENT_LENGTH") or "0"
        if not announced.isascii() or not announced.isdigit():
            return HttpResponse("Content-Length is not a number.", status=400, content_type="text/plain")
        if int(announced) <= settings.UPLOAD_LIMIT:
            return self.get_response(request)
        if request.path.startswith("/api/"):
            refused: HttpResponse = JsonResponse({"detail": too_large_words(int(announced))}, status=413)
        else:
            refused = HttpResponse(too_large_page(int(announced)), status=413)
        refused["Connection"] = "close"  # the rest of the upload is not wanted
        return refused

"""Addresses for the tests of the frame's scripts: pages on base.html with data made here, and nothing else."""

from __future__ import annotations

import math
from itertools import product

from django.contrib import messages
from django.http import HttpRequest, HttpResponse, JsonResponse
from django.template import engines
from django.urls import path

from shop.config.urls import urlpatterns as ours

TIMES = [n / 100 for n in range(101)]
FIELD = [(lower, upper) for lower, upper in product(range(100), range(100))]

HEAD = '{% extends "base.html" %}{% load static %}'
CHARTS = HEAD + """
{% block scripts %}{% include "vendor/plotly.html" %}<script src="{% static 'js/charts.js' %}" defer></script>{% endblock %}
{% block content %}<h1>Charts</h1><div class="charts">
{% include "components/chart.html" with src="/histories.json" series="rear,front" title="Tyre loads" compare="yes" %}
{% include "components/chart.html" with src="/histories.json" series="pitch" title="Body pitch" %}
{% include "components/chart.html" with src="/histories.json" series="rear,pitch" title="Mixed" %}
{% include "components/chart.html" with src="/nothing.json" series="rear" title="Waiting" %}
</div>{% endblock %}"""
HOLES = HEAD + """
{% block scripts %}<script src="{% static 'js/field.js' %}" type="module"></script>{% endblock %}
{% block content %}<h1>Field</h1><section class="field-plot" data-src="/field.json"></section>
<form><input type="hidden" name="lower_chassis"><input type="hidden" name="upper_chassis"></form>{% endblock %}"""
FORM = HEAD + """
{% block content %}<h1>Form</h1><form id="kept" method="post" data-keep>{% csrf_token %}
<label>Wheelbase <input name="wheelbase" value="{{ value }}"></label>
<label><input type="checkbox" name="bars" value="left"> left</label>
<label><input type="checkbox" name="bars" value="right" checked> right</label>
<select name="unit"><option>in</option><option>mm</option></select>
<button type="submit">Keep</button></form>{% endblock %}"""
stored = {"wheelbase": "108"}


def page(source: str):
    def shown(request: HttpRequest) -> HttpResponse:
        context = {"value": stored["wheelbase"]}
        if request.method == "POST":
            stored["wheelbase"] = context["value"] = request.POST["wheelbase"]
            messages.success(request, "Kept.")
        return HttpResponse(engines["django"].from_string(source).render(context, request))

    return shown


def histories(request: HttpRequest) -> JsonResponse:
    channels = {
        "rear": {"label": "Rear tyres", "unit": "lbf", "values": [1500 + 900 * t for t in TIMES], "settled": 2400},
        "front": {"label": "Front tyres", "unit": "lbf", "values": [1200 - 900 * t if t < 0.5 else None for t in TIMES]},
        "pitch": {"label": "Body pitch", "unit": "°", "values": [2 * math.sin(t) for t in TIMES]},
    }
    channels["rear"]["compare"] = [1400 + 900 * t for t in TIMES]
    events = [{"time": 0.25, "label": "front tyres lift"}]
    labels = {"run": "rev 3", "compare": "=rev 2"}
    return JsonResponse(
        {"time": TIMES, "unit": "s", "channels": channels, "events": events, "labels": labels, "why_empty": None}
    )


def nothing(request: HttpRequest) -> JsonResponse:
    why = "The launch is still waiting for a worker."
    return JsonResponse({"time": [], "unit": "s", "channels": {}, "events": [], "labels": {}, "why_empty": why})


def field(request: HttpRequest) -> JsonResponse:
    """Ten thousand choices: ahead from the lower hole, up from the upper one; one of them has parallel links."""
    ahead: list[float | None] = [30.0 + lower for lower, _ in FIELD]
    ahead[0] = None
    figures = {
        "ahead": {"label": "Instant centre ahead", "unit": "in", "decimals": 1, "values": ahead},
        "up": {"label": "Instant centre up", "unit": "in", "decimals": 1, "values": [upper / 5 for _, upper in FIELD]},
    }
    brackets = {place: [[40, 6 + n / 10] for n in range(100)] for place in ("lower_chassis", "upper_chassis")}
    scene = {"wheelbase": 108, "rear_radius": 16, "front_radius": 13, "cg": [48, 23], "brackets": brackets}
    holes = {
        "lower_chassis": [lower + 1 for lower, _ in FIELD],
        "upper_chassis": [upper + 1 for _, upper in FIELD],
    }
    words = {"lower_chassis": "Lower link, chassis bracket", "upper_chassis": "Upper link, chassis bracket"}
    return JsonResponse(
        {
            "count": len(FIELD), "x": "ahead", "z": "up", "colour": "ahead", "current": 5, "filters": ["ahead", "up"],
            "figures": figures, "holes": holes, "bracket_labels": words, "scene": scene, "why_empty": None,
        }
    )


urlpatterns = [
    *ours,
    path("charts-page", page(CHARTS)),
    path("field-page", page(HOLES)),
    path("form-page", page(FORM)),
    path("histories.json", histories),
    path("nothing.json", nothing),
    path("field.json", field),
]

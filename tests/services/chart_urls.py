"""Addresses for one test: a page with a chart, and one that breaks the content security policy on purpose."""

from django.http import HttpRequest, HttpResponse
from django.template.loader import render_to_string
from django.urls import path

from shop.config.urls import urlpatterns as ours

DRAW = """
document.addEventListener("DOMContentLoaded", () => {
  Plotly.newPlot("chart", [
    {x: [0, 1, 2], y: [1, 3, 2], name: "left"},
    {x: [0, 1, 2], y: [2, 1, 4], name: "right"},
  ], {title: {text: "Tyre load"}, hovermode: "x unified"}, {displaylogo: false, responsive: true})
    .then(() => document.body.dataset.drawn = "yes");
});
"""


def chart(request: HttpRequest) -> HttpResponse:
    head = render_to_string("vendor/plotly.html", request=request)
    return HttpResponse(
        f'<!doctype html><html lang="en"><head><title>chart</title><link rel="icon" href="data:,">{head}'
        '<script src="/draw.js" defer></script></head>'
        '<body><div id="chart"></div></body></html>'
    )


def draw(request: HttpRequest) -> HttpResponse:
    return HttpResponse(DRAW, content_type="text/javascript")


def forbidden(request: HttpRequest) -> HttpResponse:
    return HttpResponse(
        '<!doctype html><html lang="en"><head><title>no</title><link rel="icon" href="data:,"></head>'
        '<body><p style="color: red">styled</p>'
        "<script>document.title = 'ran'</script></body></html>"
    )


urlpatterns = [*ours, path("chart", chart), path("draw.js", draw), path("forbidden", forbidden)]

"""Every address of the application: each app brings its own."""

from django.urls import include, path

from shop.config.pages import health

urlpatterns = [
    path("healthz", health),
    path("", include("shop.people.urls")),
    path("", include("shop.garage.urls")),
    path("", include("shop.setups.urls")),
    path("", include("shop.launches.urls")),
    path("", include("shop.parts.urls")),
    path("", include("shop.studies.urls")),
    path("", include("shop.track.urls")),
    path("", include("shop.sheets.urls")),
    path("", include("shop.api.urls")),
]

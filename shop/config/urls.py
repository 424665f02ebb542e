"""Every address of the application."""

from django.urls import path

from shop.config.pages import health

urlpatterns = [
    path("healthz", health),
]

from django.urls import path

from shop.track.views import comparing, files, monday, passes, quick_revision, weekends

app_name = "track"

urlpatterns = [
    path("weekends/", weekends.weekends, name="weekends"),
    path("weekends/new", weekends.new, name="weekend-new"),
    path("weekends/<int:pk>/", weekends.weekend, name="weekend"),
    path("weekends/<int:pk>/edit", weekends.edit, name="weekend-edit"),
    path("weekends/<int:pk>/remove", weekends.remove, name="weekend-remove"),
    path("weekends/<int:weekend_id>/passes/quick", passes.quick, name="quick"),
    path("weekends/<int:weekend_id>/passes/new", passes.new, name="pass-new"),
    path("weekends/<int:weekend_id>/on-the-car", passes.revision_options, name="on-the-car"),
    path("weekends/<int:weekend_id>/revision/<int:car_id>", quick_revision.quick_revision, name="quick-revision"),
    path("weekends/<int:weekend_id>/passes.csv", files.download, name="download"),
    path("weekends/<int:weekend_id>/empty.csv", files.blank, name="blank"),
    path("weekends/<int:weekend_id>/import", files.import_passes, name="import"),
    path("weekends/<int:weekend_id>/weather", files.import_weather, name="weather"),
    path("weekends/<int:weekend_id>/weather/remove", files.clear_weather, name="weather-clear"),
    path("passes/<int:pk>/", passes.run, name="pass"),
    path("passes/<int:pk>/remove", passes.remove, name="pass-remove"),
    path("cars/<int:car_id>/passes", comparing.compare_passes, name="compare"),
    path("cars/<int:car_id>/monday", monday.monday_page, name="monday"),
]

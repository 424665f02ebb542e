from django.urls import path

from shop.launches.views import launch_page, runs, steps, taking_away

app_name = "launches"

urlpatterns = [
    path("launches/", runs.runs, name="runs"),
    path("launches/<int:pk>/", launch_page.launch, name="launch"),
    path("launches/<int:pk>/standing", launch_page.stands, name="standing"),
    path("launches/<int:pk>/histories.json", taking_away.histories, name="histories"),
    path("launches/<int:pk>/run.csv", taking_away.as_table, name="csv"),
    path("launches/<int:pk>/run.json", taking_away.whole, name="json"),
    path("launches/<int:pk>/cancel", steps.cancel, name="cancel"),
    path("launches/<int:pk>/retry", steps.retry, name="retry"),
]

from django.urls import path

from shop.studies.views import asking, holes, listing, spread, steps, study

app_name = "studies"

urlpatterns = [
    path("revisions/<int:pk>/studies/new", asking.new, name="new"),
    path("revisions/<int:pk>/studies/count", asking.count, name="count"),
    path("cars/<int:car_id>/studies", listing.studies, name="list"),
    path("revisions/<int:pk>/holes", holes.field, name="holes"),
    path("revisions/<int:pk>/holes.json", holes.data, name="holes-json"),
    path("revisions/<int:pk>/holes/<int:number>", holes.choice, name="hole-choice"),
    path("revisions/<int:pk>/holes/<int:number>/revision", holes.make_revision, name="hole-revision"),
    path("revisions/<int:pk>/holes/launch", holes.launch, name="holes-launch"),
    path("revisions/<int:pk>/steps", steps.ask, name="steps"),
    path("studies/<int:pk>/changes", steps.changes, name="changes"),
    path("revisions/<int:pk>/spread", spread.spread, name="spread"),
    path("studies/<int:pk>/", study.study, name="study"),
    path("studies/<int:pk>/table", study.table, name="table"),
    path("studies/<int:pk>/rank", study.rank, name="rank"),
    path("studies/<int:pk>/cancel", study.cancel, name="cancel"),
    path("studies/<int:pk>/go-on", study.go_on, name="go-on"),
    path("studies/<int:pk>/choices/<int:number>", study.choice, name="choice"),
    path("studies/<int:pk>/choices/<int:number>/revision", study.make_revision, name="make-revision"),
    path("studies/<int:pk>/columns.json", study.columns, name="columns"),
    path("studies/<int:pk>/rows.csv", study.export, name="csv"),
    path("studies/<int:pk>/input.json", study.stored, name="input"),
]

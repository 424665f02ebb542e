from django.urls import path

from shop.studies.views import asking, spread, study

app_name = "studies"

urlpatterns = [
    path("revisions/<int:pk>/studies/new", asking.new, name="new"),
    path("revisions/<int:pk>/studies/count", asking.count, name="count"),
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

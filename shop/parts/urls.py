from django.urls import path

from shop.parts import views

app_name = "parts"

urlpatterns = [
    path("parts/", views.shelf, name="shelf"),
    path("parts/new/<slug:key>", views.add, name="new"),
    path("parts/<int:pk>/", views.part, name="part"),
    path("parts/<int:pk>/revise", views.revise, name="revise"),
    path("parts/<int:pk>/take-off", views.take_off, name="take-off"),
    path("parts/<int:pk>/versions/<int:number>/curves.csv", views.curves, name="curves"),
]

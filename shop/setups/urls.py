from django.urls import path

from shop.setups.views import comparing, drafting, reading, trying

app_name = "setups"

urlpatterns = [
    path("cars/<int:car_id>/revisions/new", drafting.new, name="new"),
    path("cars/<int:car_id>/revisions/preview", drafting.preview, name="preview"),
    path("cars/<int:car_id>/revisions/try", trying.try_launch, name="try"),
    path("revisions/<int:pk>/", reading.revision, name="revision"),
    path("revisions/<int:pk>/edit", drafting.edit, name="edit"),
    path("revisions/<int:pk>/discard", drafting.discard, name="discard"),
    path("revisions/<int:pk>/car-file.json", reading.download_car_file, name="car-file"),
    path("cars/<int:car_id>/compare", comparing.compare, name="compare"),
]

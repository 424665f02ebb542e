from django.urls import include, path
from drf_spectacular.views import SpectacularAPIView
from rest_framework.routers import SimpleRouter

from shop.api import views

app_name = "api"

router = SimpleRouter()
router.register("customers", views.CustomerViewSet, basename="customer")
router.register("cars", views.CarViewSet, basename="car")
router.register("surveys", views.SurveyViewSet, basename="survey")
router.register("revisions", views.RevisionViewSet, basename="revision")
router.register("launches", views.JobViewSet, basename="launch")
router.register("weekends", views.WeekendViewSet, basename="weekend")
router.register("passes", views.PassViewSet, basename="pass")
router.register("studies", views.StudyViewSet, basename="study")
router.register("parts", views.PartViewSet, basename="part")

urlpatterns = [
    path("api/v1/", include(router.urls)),
    path("api/v1/cars/<int:car_id>/revisions/", views.CarRevisionsViewSet.as_view({"post": "create"}), name="new-revision"),
    path("api/v1/schema", SpectacularAPIView.as_view(), name="schema"),
]

from django.urls import path
from django.views.generic import RedirectView

from shop.garage.views import car_file, scaling, surveys
from shop.garage.views import people_and_cars as rows

app_name = "garage"

urlpatterns = [
    path("", RedirectView.as_view(pattern_name="garage:cars"), name="home"),
    path("cars/", rows.cars, name="cars"),
    path("cars/new", rows.add_car, name="car-new"),
    path("cars/from-file", car_file.from_file, name="from-file"),
    path("cars/<int:pk>/", rows.car, name="car"),
    path("cars/<int:pk>/edit", rows.edit_car, name="car-edit"),
    path("cars/<int:pk>/put-away", rows.put_away_car, name="car-put-away"),
    path("cars/<int:car_id>/measuring-sheet", surveys.measuring_sheet, name="measuring-sheet"),
    path("cars/<int:car_id>/surveys/new", surveys.new, name="survey-new"),
    path("surveys/<int:pk>/", surveys.survey, name="survey"),
    path("surveys/<int:pk>/scaling", scaling.scaling, name="scaling"),
    path("surveys/<int:pk>/edit", surveys.edit, name="survey-edit"),
    path("customers/", rows.customers, name="customers"),
    path("customers/new", rows.add_customer, name="customer-new"),
    path("customers/<int:pk>/", rows.customer, name="customer"),
    path("customers/<int:pk>/edit", rows.edit_customer, name="customer-edit"),
    path("customers/<int:pk>/put-away", rows.put_away_customer, name="customer-put-away"),
]

from django.apps import AppConfig


class GarageConfig(AppConfig):
    name = "shop.garage"
    label = "garage"
    default_auto_field = "django.db.models.BigAutoField"

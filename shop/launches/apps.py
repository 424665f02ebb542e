from django.apps import AppConfig


class LaunchesConfig(AppConfig):
    name = "shop.launches"
    label = "launches"
    default_auto_field = "django.db.models.BigAutoField"

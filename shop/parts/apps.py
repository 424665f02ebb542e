from django.apps import AppConfig


class PartsConfig(AppConfig):
    name = "shop.parts"
    label = "parts"
    default_auto_field = "django.db.models.BigAutoField"

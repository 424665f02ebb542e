from django.apps import AppConfig


class SetupsConfig(AppConfig):
    name = "shop.setups"
    label = "setups"
    default_auto_field = "django.db.models.BigAutoField"

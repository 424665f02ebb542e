from django.apps import AppConfig


class SheetsConfig(AppConfig):
    name = "shop.sheets"
    label = "sheets"
    default_auto_field = "django.db.models.BigAutoField"

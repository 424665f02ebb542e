from django.apps import AppConfig


class TrackConfig(AppConfig):
    name = "shop.track"
    label = "track"
    default_auto_field = "django.db.models.BigAutoField"

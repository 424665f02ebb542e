from django.apps import AppConfig


class ConfigConfig(AppConfig):
    name = "shop.config"
    label = "config"

    def ready(self) -> None:
        # Whoever sends a task (a page, a command, a test) must send it through our broker, not through Celery's default.
        import shop.config.celery  # noqa: F401

from django.apps import AppConfig


class StudiesConfig(AppConfig):
    name = "shop.studies"
    label = "studies"
    default_auto_field = "django.db.models.BigAutoField"

    def ready(self) -> None:
        """Tell the queue how a study is worked on, and that several workers may work on one."""
        from shop.launches.kinds import KINDS, SHARED
        from shop.studies import running, spread

        KINDS["study"] = running.run
        KINDS["sensitivity"] = spread.run
        SHARED.add("study")

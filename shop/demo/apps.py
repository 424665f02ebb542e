from django.apps import AppConfig


class DemoConfig(AppConfig):
    name = "shop.demo"
    label = "demo"

"""`manage.py demo`: load the demo shop into a database that has no shop yet."""

from __future__ import annotations

from typing import Any

from django.core.management.base import BaseCommand, CommandError

from shop.demo.data import MEMBERS, PASSWORD
from shop.demo.load import load_demo
from shop.people.models import Shop

SIGN_IN = (MEMBERS[0][0], PASSWORD)


class Command(BaseCommand):
    help = "Load the invented demo shop into an empty database."

    def handle(self, *args: Any, **options: Any) -> None:
        if Shop.objects.exists():
            raise CommandError("this database already has a shop; the demo is only loaded into an empty one")
        load_demo()
        self.stdout.write(f"Demo shop loaded. Sign in as {SIGN_IN[0]} with {SIGN_IN[1]}")

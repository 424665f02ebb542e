"""What must be in place before the application serves: tables, a shop, and the files for browsers."""

from __future__ import annotations

import fcntl
import hashlib
import secrets
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from importlib.metadata import version
from io import StringIO
from pathlib import Path

from django.conf import settings
from django.contrib.staticfiles.finders import get_finders
from django.core.management import call_command
from django.core.management.base import CommandError
from django.db import DatabaseError, connection, transaction
from django.db.migrations.executor import MigrationExecutor

from shop.config import warming

Say = Callable[[str], None]


@contextmanager
def alone() -> Iterator[None]:
    """One start prepares at a time."""
    lock = Path(settings.DATA_DIR) / "start.lock"
    try:
        handle = lock.open("w")
    except OSError as fault:
        raise CommandError(f"The data folder {settings.DATA_DIR} cannot be written: {fault.strerror}.") from fault
    with handle:
        fcntl.flock(handle, fcntl.LOCK_EX)
        yield


def prepare(say: Say, *, empty: bool) -> None:
    with alone():
        try:
            migrate(say)
            open_shop(say, empty=empty)
        except DatabaseError as fault:
            raise CommandError(f"The database cannot be used: {str(fault).strip().splitlines()[0]}") from fault
        collect(say)
        compile_solver(say)


def compile_solver(say: Say) -> None:
    if not warming.is_compiled():
        say("Compiling the solver for this machine, once (usually under a minute).")
        warming.compile_once()


def migrate(say: Say) -> None:
    executor = MigrationExecutor(connection)
    if executor.migration_plan(executor.loader.graph.leaf_nodes()):
        say("Bringing the database up to date (a few seconds).")
        call_command("migrate", interactive=False, verbosity=0)


def open_shop(say: Say, *, empty: bool) -> None:
    from shop.people.models import Shop

    if Shop.objects.exists():
        return
    if not empty:
        say("Loading the demo shop, with everything in it invented (some seconds).")
        call_command("demo", verbosity=0, stdout=StringIO())
        return
    email, password = make_first_shop()
    say(
        "Made an empty shop. Its owner signs in as\n"
        f"    {email}\n    {password}\n"
        f"This is shown once. For a new password: python3 manage.py changepassword {email}"
    )


def make_first_shop() -> tuple[str, str]:
    from shop.people.models import Membership, Shop, User

    email, password = "owner@shop.example", "-".join(secrets.token_hex(2) for _ in range(4))
    with transaction.atomic():
        shop = Shop.objects.create(name="Our shop")
        owner = User.objects.create_user(email, "Owner", password)
        Membership.objects.create(shop=shop, user=owner, role="owner")
    return email, password


def demo_sign_in() -> tuple[str, str] | None:
    """The demo's e-mail address and password, as long as they open the door."""
    from shop.demo import data
    from shop.people.models import User

    email = data.MEMBERS[0][0]
    user = User.objects.filter(email=email, is_active=True).first()
    return (email, data.PASSWORD) if user and user.check_password(data.PASSWORD) else None


def collect(say: Say) -> None:
    """Collect and compress the files for browsers, unless they are what was collected last time."""
    mark = fingerprint()
    stamp = Path(settings.STATIC_ROOT).with_suffix(".stamp")
    if stamp.exists() and stamp.read_text() == mark and Path(settings.STATIC_ROOT).is_dir():
        return
    say("Collecting what browsers load: scripts, styles, charts (some seconds).")
    call_command("collectstatic", interactive=False, verbosity=0)
    stamp.write_text(mark)


def fingerprint() -> str:
    found = hashlib.sha256(repr([version(name) for name in ("Django", "whitenoise")]).encode())
    for finder in get_finders():
        for name, storage in sorted(finder.list(None), key=lambda pair: pair[0]):
            state = Path(storage.path(name)).stat()
            found.update(f"{name} {state.st_size} {state.st_mtime_ns}\n".encode())
    return found.hexdigest()

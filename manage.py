#!/usr/bin/env python3
"""The one way in: `python3 manage.py start`, `python3 manage.py test`, and Django's own commands."""

import os
import sys

ROOT = os.path.dirname(os.path.abspath(__file__))


def main() -> None:
    # Kept in words that any Python 3 can read, so that an old one gets a sentence and not a SyntaxError.
    if sys.version_info < (3, 11):
        sys.exit(
            "Launch Ledger needs Python 3.11 or newer, and this is %s (%s). Start it with a newer one, "
            "such as: python3.12 manage.py %s" % (sys.version.split()[0], sys.executable, " ".join(sys.argv[1:]))
        )
    sys.path.insert(0, ROOT)
    from shop.config import bootstrap

    bootstrap.ready(ROOT, sys.argv[1:])

    os.environ.setdefault("DJANGO_SETTINGS_MODULE", "shop.config.settings")
    from django.core.exceptions import ImproperlyConfigured
    from django.core.management import execute_from_command_line

    try:
        execute_from_command_line(sys.argv)
    except ImproperlyConfigured as fault:
        sys.exit("Launch Ledger cannot start: %s" % fault)


if __name__ == "__main__":
    main()

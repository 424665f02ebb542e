"""Serves scripts out of installed packages under `vendor/`, so that no copy of them lives in this project.

plotly writes a style element when it loads, which a strict content security policy refuses. It leaves that out when
an element with the expected id is already there, so its rules are read out of the installed script, once, into a
stylesheet that pages link themselves; see templates/vendor/plotly.html.
"""

from __future__ import annotations

import json
import re
import uuid
from collections.abc import Iterable, Iterator
from importlib.util import find_spec
from pathlib import Path
from typing import Any

from django.conf import settings
from django.contrib.staticfiles.finders import BaseFinder
from django.core.exceptions import ImproperlyConfigured
from django.core.files.storage import FileSystemStorage

PREFIX = "vendor"

# plotly's rules, `{"X,X div": "direction:ltr;…", …}` in the minified script: X and Y stand for two selectors.
RULES = re.compile(r'=\{("X,X div":.*?)\};for\(', re.DOTALL)
RULE = re.compile(r"""(?:"([^"]+)"|(\w+)):("(?:[^"\\]|\\.)*"|'(?:[^'\\]|\\.)*')""")
# A second style, of its maps (which we do not draw), is left out when an element with this hash as its id exists.
MARKED_STYLE = re.compile(r'getElementById\("([0-9a-f]{64})"\)')


def folder_of(package: str) -> Path:
    spec = find_spec(package)
    if spec is None or spec.origin is None:
        raise ImproperlyConfigured(f"the package {package} is not installed; python3 manage.py start installs it.")
    return Path(spec.origin).parent


def first_of(folder: Path, *names: str) -> Path:
    for name in names:
        if (folder / name).is_file():
            return folder / name
    raise ImproperlyConfigured(f"{folder} holds none of {', '.join(names)}.")


def stylesheet(script: str) -> str:
    """The rules that plotly's `script` would have injected, as a stylesheet."""
    block = RULES.search(script)
    if block is None or RULE.sub("", block[1]).strip(","):
        raise ImproperlyConfigured("the installed plotly keeps its style rules in a way this project cannot read.")
    lines = []
    for quoted, bare, literal in RULE.findall(block[1]):
        selector = re.sub(r"^,", " ,", quoted or bare).replace("X", ".js-plotly-plot .plotly")
        selector = selector.replace("Y", ".plotly-notifier")
        body = json.loads(literal) if literal[0] == '"' else literal[1:-1]
        lines.append(f"{selector}{{{body}}}")
    return "\n".join(lines) + "\n"


def forerunner(script: str) -> str:
    """A script that puts the marks in place on which plotly leaves its other styles out."""
    marks = json.dumps(sorted(set(MARKED_STYLE.findall(script))))
    return (
        f"for (const id of {marks}) {{\n"
        '  const mark = document.createElement("meta");\n'
        "  mark.id = id;\n"
        "  document.head.append(mark);\n"
        "}\n"
    )


def write_generated(folder: Path, plotly: Path) -> None:
    """Write what is derived from the installed plotly, unless that is there already and newer."""
    targets = {"plotly.css": stylesheet, "plotly-before.js": forerunner}
    made = plotly.stat().st_mtime
    if all((folder / name).is_file() and (folder / name).stat().st_mtime >= made for name in targets):
        return
    folder.mkdir(parents=True, exist_ok=True)
    script = plotly.read_text(encoding="utf-8")
    for name, derive in targets.items():
        aside = folder / f".{name}.{uuid.uuid4().hex}"  # two threads may come here at once
        aside.write_text(derive(script), encoding="utf-8")
        aside.replace(folder / name)


class PackagedFinder(BaseFinder):
    """`vendor/plotly.min.js`, `vendor/plotly.css`, `vendor/plotly-before.js` and `vendor/htmx.min.js`."""

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        generated = Path(settings.DATA_DIR) / "generated"
        plotly = folder_of("plotly") / "package_data" / "plotly.min.js"
        write_generated(generated, plotly)
        htmx = first_of(folder_of("django_htmx") / "static" / "django_htmx", "htmx-2.min.js", "htmx.min.js")
        self.files = {
            "plotly.min.js": plotly,
            "plotly.css": generated / "plotly.css",
            "plotly-before.js": generated / "plotly-before.js",
            "htmx.min.js": htmx,
        }

    def check(self, **kwargs: Any) -> list[Any]:
        return []

    def find(self, path: str, find_all: bool = False, **kwargs: Any) -> Any:
        folder, _, name = path.rpartition("/")
        file = self.files.get(name) if folder == PREFIX else None
        if find_all:
            return [str(file)] if file else []
        return str(file) if file else []

    def list(self, ignore_patterns: Iterable[str] | None) -> Iterator[tuple[str, FileSystemStorage]]:
        for name, file in self.files.items():
            yield name, Packaged(name, file)


class Packaged(FileSystemStorage):
    """One packaged file, under the name it is served by, whatever it is called where it lies."""

    prefix = PREFIX

    def __init__(self, name: str, file: Path) -> None:
        super().__init__(location=file.parent)
        self.served = {name: file}

    def path(self, name: str) -> str:
        return str(self.served.get(name, Path(self.location) / name))

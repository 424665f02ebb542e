"""manage.py's first step, in small folders of their own: each holds a bootstrap, requirements, and a manage.py that
only says where it runs. The whole application from nothing is started once, in test_first_start."""

from __future__ import annotations

import base64
import hashlib
import os
import pwd
import shutil
import subprocess
import sys
import zipfile
from pathlib import Path
from typing import Any

import pytest

from tests.services.stack import ROOT, clean_environment

BASE = getattr(sys, "_base_executable", sys.executable)
MANAGE = "import os, sys\nprint('inside', sys.prefix, os.environ.get('PIP_TARGET'), sys.argv[1:])\n"
NOWHERE = {
    "PIP_INDEX_URL": "http://127.0.0.1:9/",
    "PIP_EXTRA_INDEX_URL": "",
    "PIP_FIND_LINKS": "",
    "PIP_CONFIG_FILE": os.devnull,
    "PIP_RETRIES": "0",
    "PIP_NO_CACHE_DIR": "1",
}


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    root = tmp_path / "a folder with spaces"
    (root / "tests").mkdir(parents=True)
    shutil.copy(ROOT / "shop" / "config" / "bootstrap.py", root / "bootstrap.py")
    (root / "manage.py").write_text(MANAGE)
    (root / "requirements.txt").write_text("")
    (root / "tests" / "requirements.txt").write_text("-r ../requirements.txt\n")
    return root


def run(root: Path, *arguments: str, before: str = "", check: bool = True, **options: Any) -> str:
    """Run the bootstrap of `root` as manage.py does, and give what was said."""
    program = f"import sys; {before}\nimport bootstrap; bootstrap.ready({str(root)!r}, {list(arguments)!r})\n"
    environment = clean_environment(**{"PYTHONPATH": str(root), **options.pop("environment", {})})
    done = subprocess.run(
        [BASE, "-c", program],
        cwd=root,
        env=environment,
        text=True,
        timeout=120,
        stdout=subprocess.PIPE,
        stderr=subprocess.STDOUT,
        **options,
    )
    assert (done.returncode == 0) == check, done.stdout
    assert "Traceback" not in done.stdout
    return done.stdout


def wheel(root: Path, name: str) -> None:
    """Put a package that says its own name into `root`, and require it: installing it asks nobody."""
    file = root / f"{name}-1-py3-none-any.whl"
    content = {
        f"{name}.py": f"words = 'this is {name}'\n",
        f"{name}-1.dist-info/METADATA": f"Metadata-Version: 2.1\nName: {name}\nVersion: 1\n",
        f"{name}-1.dist-info/WHEEL": "Wheel-Version: 1.0\nGenerator: tests\nRoot-Is-Purelib: true\nTag: py3-none-any\n",
    }
    record = "".join(
        f"{path},sha256={base64.urlsafe_b64encode(hashlib.sha256(text.encode()).digest()).rstrip(b'=').decode()},{len(text)}\n"
        for path, text in content.items()
    )
    with zipfile.ZipFile(file, "w") as archive:
        for path, text in {**content, f"{name}-1.dist-info/RECORD": record}.items():
            archive.writestr(path, text)
    (root / "requirements.txt").write_text(f"./{file.name}\n")
    (root / "manage.py").write_text(f"{MANAGE}import {name}\nprint({name}.words)\n")


def test_makes_its_own_python_once_and_goes_on_inside_it(folder: Path) -> None:
    wheel(folder, "ledgertestone")
    first = run(folder, "start", "--empty")
    assert "Installing what Launch Ledger needs" in first
    assert f"inside {folder / '.venv'} None ['start', '--empty']" in first
    assert "this is ledgertestone" in first
    second = run(folder, "start", environment=NOWHERE)
    assert "Installing" not in second
    assert "this is ledgertestone" in second

    wheel(folder, "ledgertesttwo")  # requirements changed: only they are installed
    third = run(folder, "start")
    assert "Installing" in third
    assert "Making" not in third
    assert "this is ledgertesttwo" in third


def test_pip_settings_of_the_person_do_not_lead_elsewhere(folder: Path, tmp_path: Path) -> None:
    wheel(folder, "ledgertestone")
    astray = tmp_path / "astray"
    said = run(folder, "start", environment={"PIP_TARGET": str(astray), "PIP_USER": "1", "PIP_PREFIX": str(astray)})
    assert "this is ledgertestone" in said
    assert not astray.exists()


def test_tests_install_their_own_requirements_on_top(folder: Path) -> None:
    run(folder, "start")
    assert "Installing what Launch Ledger and its tests need" in run(folder, "test")
    assert "Installing" not in run(folder, "test")
    assert "Installing" not in run(folder, "start")


def test_a_broken_or_moved_python_is_made_anew(folder: Path) -> None:
    run(folder, "start")
    (folder / ".venv" / "bin" / "python").unlink()
    assert "Making a Python" in run(folder, "start")
    moved = folder.with_name("moved")
    folder.rename(moved)
    assert f"inside {moved / '.venv'}" in run(moved, "start")


def test_two_at_once_do_not_install_over_each_other(folder: Path) -> None:
    wheel(folder, "ledgertestone")
    program = f"import bootstrap; bootstrap.ready({str(folder)!r}, ['start'])"
    both = [
        subprocess.Popen(
            [BASE, "-c", program],
            cwd=folder,
            env=clean_environment(PYTHONPATH=str(folder)),
            text=True,
            stdout=subprocess.PIPE,
            stderr=subprocess.STDOUT,
        )
        for _ in range(2)
    ]
    said = [process.communicate(timeout=120)[0] for process in both]
    assert [process.returncode for process in both] == [0, 0], said
    assert sorted("Installing" in words for words in said) == [False, True]
    assert sorted("waiting for it to finish" in words for words in said) == [False, True]
    assert all("this is ledgertestone" in words for words in said)


@pytest.mark.parametrize("index", ["http://127.0.0.1:9/", "https://127.0.0.1:9/"])
def test_without_a_network_the_first_start_says_so(folder: Path, index: str) -> None:
    (folder / "requirements.txt").write_text("django\n")
    said = run(folder, "start", check=False, environment={**NOWHERE, "PIP_INDEX_URL": index, "PIP_RETRIES": "1"})
    assert "no package index could be reached" in said.splitlines()[-1]
    assert "Retrying" not in said


def test_what_pip_says_is_shown_when_it_fails_for_another_reason(folder: Path) -> None:
    (folder / "requirements.txt").write_text("./nothing-of-this-name.whl\n")
    said = run(folder, "start", check=False, environment=NOWHERE)
    assert "nothing-of-this-name" in said
    assert said.splitlines()[-1].endswith("the lines above say why.")


@pytest.mark.parametrize("module", ["venv", "ensurepip"])
def test_without_the_venv_module_it_gives_the_line_to_run(folder: Path, module: str) -> None:
    said = run(folder, "start", check=False, before=f"sys.modules[{module!r}] = None")
    assert said.count("\n") == 1
    assert f"sudo apt install python{sys.version_info[0]}.{sys.version_info[1]}-venv" in said


def test_in_a_folder_that_cannot_be_written_it_says_so(tmp_path: Path) -> None:
    root = Path("/tmp") / f"ledger-read-only-{os.getpid()}"  # pytest's own folders are closed to other users
    root.mkdir()
    try:
        for name, text in {"manage.py": MANAGE, "requirements.txt": ""}.items():
            (root / name).write_text(text)
        shutil.copy(ROOT / "shop" / "config" / "bootstrap.py", root)
        root.chmod(0o555)
        become = ""
        if os.geteuid() == 0:  # root may write anywhere; another user may not be able to start this Python, but to be it
            nobody = pwd.getpwnam("nobody")
            become = f"import os, bootstrap; os.setgroups([]); os.setgid({nobody.pw_gid}); os.setuid({nobody.pw_uid})"
        said = run(root, "start", check=False, before=become)
        assert said.count("\n") == 1
        assert str(root) in said
        assert "Permission denied" in said
    finally:
        root.chmod(0o755)
        shutil.rmtree(root)


def test_an_old_python_gets_a_sentence() -> None:
    program = (
        "import sys, runpy; sys.version_info = (3, 9, 2); sys.argv = ['manage.py', 'start']; "
        f"runpy.run_path({str(ROOT / 'manage.py')!r}, run_name='__main__')"
    )
    done = subprocess.run([BASE, "-c", program], capture_output=True, text=True)
    assert done.returncode != 0
    assert "needs Python 3.11 or newer" in done.stderr
    assert "Traceback" not in done.stderr

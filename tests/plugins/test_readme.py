"""The plugin of plugins/README.md, typed off the page, installed without network, tested and used."""

import os
import re
import subprocess
import sys
from pathlib import Path

import pytest

PAGE = Path(__file__).parents[2] / "plugins" / "README.md"
BLOCK = re.compile(r"^```\w*\n# file: (\S+?)(, [\w ]+)?\n(.*?)^```$", re.MULTILINE | re.DOTALL)
OFFLINE = ["--no-build-isolation", "--no-deps", "--no-index", "--quiet", "--disable-pip-version-check"]


def blocks():
    """(file, what is done with it, text) of each block on the page."""
    return [(name, note or "", text) for name, note, text in BLOCK.findall(PAGE.read_text(encoding="utf-8"))]


def written(folder, *, closed_form):
    """The files of the page in a folder, the least plugin or the one with its closed form."""
    folder.mkdir()
    for name, note, text in blocks():
        path = folder / name
        if not note:
            path.write_text(text, encoding="utf-8")
        elif closed_form:
            old = path.read_text(encoding="utf-8")
            first, rest = old.split("\n", 1)  # the docstring stays first
            path.write_text(f"{first}\n{text}{rest}" if "top" in note else f"{old}\n{text}", encoding="utf-8")
    return folder


@pytest.fixture(scope="session", params=[False, True], ids=["least", "closed form"])
def folder(request, tmp_path_factory):
    root = tmp_path_factory.mktemp("readme")
    source = written(root / "source", closed_form=request.param)
    command = [sys.executable, "-m", "pip", "install", *OFFLINE, "--target", root / "site", source]
    subprocess.run(command, check=True)
    return root


def python(folder, *arguments):
    environment = os.environ | {"PYTHONPATH": str(folder / "site")}
    command = [sys.executable, *arguments]
    return subprocess.run(
        command, env=environment, capture_output=True, text=True, check=False, cwd=folder / "source"
    )


def test_the_laws_hold(folder):
    run = python(folder, "-m", "pytest", "-q", "-p", "no:cacheprovider", "test_stiff.py")
    assert run.returncode == 0, run.stdout


def test_the_file_is_answered(folder):
    run = python(folder, "-m", "eoscore", "run", "shaken.tarn")
    assert run.returncode == 0, run.stderr
    assert "T_c" in run.stdout


def test_the_table_of_shipped_plugins_is_whole():
    listed = set(re.findall(r"^\| `(\w+\.py)`", PAGE.read_text(encoding="utf-8"), re.MULTILINE))
    assert listed == {path.name for path in PAGE.parent.glob("*.py")} - {"__init__.py"}

"""A stranger's package, installed beside eoscore without network, found and used through its entry points."""

import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest
from scipy.special import ive

PACKAGE = Path(__file__).parent / "package"


@pytest.fixture(scope="session")
def site(tmp_path_factory):
    """A folder into which the package was installed by pip from a copy of its source."""
    root = tmp_path_factory.mktemp("stranger")
    source = shutil.copytree(PACKAGE, root / "source")
    offline = ["--no-build-isolation", "--no-deps", "--no-index", "--quiet", "--disable-pip-version-check"]
    subprocess.run(
        [sys.executable, "-m", "pip", "install", *offline, "--target", root / "site", source], check=True
    )
    return root / "site"


@pytest.fixture
def python(site):
    """Runs Python with the stranger's package on its path, and gives back what it printed."""

    def run(*arguments, **options):
        environment = os.environ | {"PYTHONPATH": str(site)}
        return subprocess.run(
            [sys.executable, *arguments],
            env=environment,
            capture_output=True,
            text=True,
            check=False,
            **options,
        )

    return run


def printed(process):
    assert process.returncode == 0, process.stderr
    return json.loads(process.stdout)


NAMES = """
import json, sys
from eoscore.gas.registry import dispersion_names
print(json.dumps([dispersion_names(), [m for m in sys.modules if m.startswith("stranger")]]))
"""


def test_names_are_known_before_anything_is_imported(python):
    names, imported = printed(python("-c", NAMES))
    assert names == ["band", "free", "nowhere", "relativistic", "trapped", "unripe"]
    assert imported == []


LISTING = """
import json
from eoscore.gas.registry import installed
print(json.dumps({plugin.name: [plugin.package, plugin.refusal] for plugin in installed()}))
"""


def test_a_broken_plugin_is_listed_with_its_refusal_and_the_others_work(python):
    listed = printed(python("-c", LISTING))
    assert listed["band"] == ["stranger", None]
    assert "No module named 'stranger.nowhere'" in listed["nowhere"][1]
    assert "name = 'ripe'" in listed["unripe"][1]
    assert "origin" in listed["unripe"][1]
    assert listed["free"] == ["eoscore", None]


USE = """
import json
from eoscore.gas.registry import dispersion
band = dispersion("band")(values={"J": 6.6e-32, "a": 5e-7})
print(json.dumps([float(band.energy_at(6.6e-28, 0.0, 0.0)), [p.name for p in band.signature().parameters]]))
"""


def test_the_band_computes(python):
    energy, parameters = printed(python("-c", USE))
    assert energy == pytest.approx(
        4 * 6.6e-32, rel=1e-2, abs=0
    )  # about the edge of the zone, pi hbar/a = 6.63e-28 kg m/s
    assert parameters == ["J", "a"]


FILE = """
gas atoms {
    dispersion band { J = 2e-32 J
                      a = 500 nm }
}
find n_c for atoms in uniform with T = 1 nK
"""


def test_a_file_asks_for_the_band(python, tmp_path):
    """n_c a^3 = sum_j [e^{-2jJ/kT} I_0(2jJ/kT)]^3 (checked in tests/published), here by a plain sum and its tail."""
    (tmp_path / "lattice.tarn").write_text(FILE, encoding="utf-8")
    found = printed(python("-m", "eoscore", "run", "--json", tmp_path / "lattice.tarn"))["answers"][0][
        "found"
    ]["n_c"]
    x = 2 * 2e-32 / (1.380649e-23 * 1e-9)
    j = np.arange(1, 4001)
    tail = (
        2 / np.sqrt(4000.5) / (2 * np.pi * x) ** 1.5
    )  # int of (2 pi j x)^-3/2, the first term of DLMF 10.40.1
    assert found["value"] * 5e-7**3 == pytest.approx(np.sum(ive(0, j * x) ** 3) + tail, rel=1e-6, abs=0)


def test_a_file_asks_for_a_broken_one(python, tmp_path):
    (tmp_path / "bad.tarn").write_text("gas g { dispersion unripe }", encoding="utf-8")
    run = python("-m", "eoscore", "check", tmp_path / "bad.tarn")
    assert run.returncode == 1
    assert "plugin 'unripe' is refused" in run.stderr
    assert "Traceback" not in run.stderr


def test_the_command_lists_it(python):
    run = python("-m", "eoscore", "plugins")
    assert run.returncode == 0, run.stderr
    assert "band" in run.stdout
    assert "Ashcroft" in run.stdout

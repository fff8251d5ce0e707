"""How dispersions are found by their entry points."""

import subprocess
import sys
from importlib.metadata import EntryPoint

import pytest

from eoscore.errors import PluginError
from eoscore.gas import registry
from eoscore.gas.registry import GROUP, Signatures, dispersion, dispersion_names, installed


@pytest.fixture
def points(monkeypatch):
    """Sets the entry points that are found, as (name, value)."""

    def put(*pairs):
        found = [EntryPoint(name, value, GROUP) for name, value in pairs]
        monkeypatch.setattr(registry, "entry_points", lambda group: found if group == GROUP else [])
        forget()

    def forget():
        registry._found.cache_clear()
        registry.dispersion.cache_clear()

    yield put
    monkeypatch.undo()
    forget()


def test_the_shipped_ones_come_through_the_same_door():
    assert {"free", "relativistic", "trapped"} <= set(dispersion_names())
    assert dispersion("free").__module__ == "eoscore.plugins.free"


def test_an_unknown_name_is_told_with_the_nearest():
    with pytest.raises(PluginError, match=r"'relativstic' .* one of free, .*; did you mean relativistic\?"):
        dispersion("relativstic")


def test_two_packages_with_one_name_are_both_refused_and_the_rest_works(points):
    points(("free", "eoscore.plugins.free:Free"), ("twin", "one:A"), ("twin", "two:B"))
    with pytest.raises(
        PluginError, match="2 dispersions of this name, from one and two; wanted one package per name"
    ):
        dispersion("twin")
    assert dispersion("free").name == "free"


@pytest.mark.parametrize(
    ("value", "words"),
    [
        ("no_such_module_here:A", "fails to import: ModuleNotFoundError"),
        ("eoscore.plugins.free:Fee", "fails to import: AttributeError"),
        ("eoscore.plugins.free:__all__", "list .'Free'., not a class"),
        ("eoscore.plugins.free:Free", "name = 'free'; wanted name = 'odd'"),
    ],
)
def test_a_bad_entry_point_is_refused_when_asked_for_and_listed(points, value, words):
    points(("odd", value))
    with pytest.raises(PluginError, match=words):
        dispersion("odd")
    (listed,) = installed()
    assert listed.kind is None
    assert "plugin 'odd' is refused" in listed.refusal


def test_signatures_import_only_the_one_asked_for(points):
    points(("free", "eoscore.plugins.free:Free"), ("odd", "no_such_module_here:A"))
    signatures = Signatures()
    assert list(signatures) == ["free", "odd"]
    assert len(signatures) == 2
    assert "odd" in signatures
    assert signatures["free"].momentum == ("p",)
    assert signatures.get("even") is None
    with pytest.raises(PluginError, match="fails to import"):
        signatures["odd"]


def test_names_cost_no_plugin_import():
    code = "import sys, eoscore.gas.registry as r; r.dispersion_names(); print('eoscore.plugins.free' in sys.modules)"
    assert (
        subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True).stdout
        == "False\n"
    )

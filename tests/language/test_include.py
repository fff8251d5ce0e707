"""`use`: files below the folder, each read once, never above, never in a circle."""

from __future__ import annotations

from pathlib import Path

import pytest

from eoscore.errors import TarnError
from eoscore.language import load

from .labs import DISPERSIONS, GAS, program


@pytest.fixture
def lab(tmp_path: Path):
    """A folder of Tarn files; `lab("name.tarn", text)` writes one and gives its path."""
    folder = tmp_path / "lab"
    folder.mkdir()

    def write(name: str, text: str) -> Path:
        path = folder / name
        path.parent.mkdir(exist_ok=True)
        path.write_text(text, encoding="utf-8")
        return path

    return write


def opened(path: Path):
    return load(path, dispersions=DISPERSIONS)


def test_a_used_file_gives_its_declarations_but_not_its_questions(lab):
    lab("beams.tarn", GAS + "P = 2 W\nfind P for sr in uniform with n = 1 m-3, T = 1 K")
    found = opened(lab("main.tarn", 'use "beams.tarn"\nQ = 2*P'))
    assert found.bind("sr", None).value("Q")[0] == 4.0
    assert found.questions == ()


def test_a_used_file_finds_others_beside_itself(lab):
    lab("deep/inner.tarn", "w = 3 m")
    lab("deep/outer.tarn", 'use "inner.tarn"\nv = 2*w')
    found = opened(lab("main.tarn", GAS + 'use "deep/outer.tarn"'))
    assert found.bind("sr", None).value("v")[0] == 6.0


def test_a_file_that_is_used_twice_is_read_once(lab):
    lab("shared.tarn", "w = 3 m")
    lab("left.tarn", 'use "shared.tarn"')
    lab("right.tarn", 'use "shared.tarn"')
    assert opened(lab("main.tarn", GAS + 'use "left.tarn"\nuse "right.tarn"')).gases == ("sr",)


def test_files_in_a_circle_are_told_as_one(lab):
    lab("a.tarn", 'use "b.tarn"')
    lab("b.tarn", 'use "a.tarn"')
    with pytest.raises(TarnError, match=r"cannot use each other in a circle: a.tarn uses b.tarn uses a.tarn"):
        opened(lab("main.tarn", 'use "a.tarn"'))


def test_a_file_cannot_use_itself(lab):
    with pytest.raises(TarnError, match=r"in a circle: main.tarn uses main.tarn"):
        opened(lab("main.tarn", 'use "main.tarn"'))


@pytest.mark.parametrize(
    ("target", "message"),
    [
        ("../secret.tarn", "leads out of the folder"),
        ("deep/../../secret.tarn", "leads out of the folder"),
        ("link.tarn", "leads out of the folder"),
        ("/etc/passwd", "takes the relative path of a .tarn file"),
        ("notes.txt", "takes the relative path of a .tarn file"),
        ("nothing.tarn", "there is no file `nothing.tarn`"),
        ("deep.tarn", "there is no file `deep.tarn`"),
        ("x" * 5000 + ".tarn", "there is no file"),
        ("ring.tarn", "there is no file"),
    ],
)
def test_what_is_no_file_below_the_folder_is_refused(lab, target, message):
    main = lab("main.tarn", f'use "{target}"')
    folder = main.parent
    (folder.parent / "secret.tarn").write_text("a = 1")
    (folder / "deep").mkdir()
    (folder / "deep.tarn").mkdir()
    (folder / "link.tarn").symlink_to(folder.parent / "secret.tarn")
    (folder / "ring.tarn").symlink_to(folder / "ring.tarn")
    with pytest.raises(TarnError, match=message):
        opened(main)


def test_faults_of_a_used_file_carry_its_name(lab):
    lab("beams.tarn", "\na = 1 m + 1 s")
    with pytest.raises(TarnError, match="cannot be added") as caught:
        opened(lab("main.tarn", 'use "beams.tarn"'))
    (complaint,) = caught.value.complaints
    assert (Path(complaint.file).name, complaint.line) == ("beams.tarn", 2)


def test_a_used_file_that_does_not_parse_is_told_in_its_own_name(lab):
    lab("beams.tarn", "a = (1")
    with pytest.raises(TarnError, match=r"beams.tarn:1") as caught:
        opened(lab("main.tarn", 'use "beams.tarn"\nb = a'))
    assert all(Path(complaint.file).name == "beams.tarn" for complaint in caught.value.complaints)


def test_the_same_name_in_two_files_is_told_with_both(lab):
    lab("beams.tarn", "P = 2 W")
    with pytest.raises(TarnError, match=r"`P` is defined twice; first in .*beams.tarn, line 1"):
        opened(lab("main.tarn", 'use "beams.tarn"\nP = 3 W'))


def test_a_text_without_a_folder_can_use_the_shelf_only():
    assert program("use optics\n" + GAS).gases == ("sr",)
    with pytest.raises(TarnError, match="a text without a folder cannot use files"):
        program('use "beams.tarn"')


def test_the_files_own_names_go_before_the_shelfs():
    """A shelf function keeps meaning its own helpers, whatever the file calls its own."""
    text = "use optics\nrayleigh_range(w, lambda) = 0*w\nr = beam_radius(1 m, 1 m, pi*1 m)/(1 m)\n" + GAS
    assert program(text).bind("sr", None).value("r")[0] == pytest.approx(2**0.5)


def test_a_missing_file_is_an_error_of_the_system(tmp_path):
    with pytest.raises(FileNotFoundError, match=r"nowhere.tarn"):
        opened(tmp_path / "nowhere.tarn")

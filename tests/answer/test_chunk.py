"""Grids are cut by the question alone, and come together as they were."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import constants, special

import eoscore
from eoscore.answer.chunk import chunks_of
from eoscore.answer.journal import Journal, JournalBusyError
from eoscore.answer.packing import packed, unpacked
from eoscore.answer.running import Run

BOWL = """
gas strontium { m = 84 u }
trap bowl {
    f = 100.0(5) Hz
    V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2)
}
"""
LARGE = (
    BOWL
    + "find N_0, kappa_T for strontium in bowl over N = geometric(1e4, 1e6, 200), T = even(20 nK, 500 nK, 200)"
)
MIXED = (
    BOWL
    + "find T_c for strontium in bowl over T = even(1 nK, 9 nK, 3), f = even(50 Hz, 90 Hz, 150), N = [1e4, 1e5]"
)


@pytest.fixture(scope="module")
def large():
    (answer,) = eoscore.loads(LARGE.replace("100.0(5)", "100")).answers()
    return answer


def test_the_condensate_is_the_closed_form_at_every_point(large):
    """N_0 = N - zeta(3) (kT/hbar w)^3 where positive: Bagnato et al., PRA 35, 4354 (1987), from memory."""
    N, T = large.over["N"][:, None], large.over["T"]
    omega = 2 * np.pi * 100.0 * 2 ** (1 / 3)
    excited = special.zeta(3) * (constants.k * T / (constants.hbar * omega)) ** 3
    expected = np.maximum(N - excited, 0.0)
    found = large.found["N_0"].value
    assert found.shape == (200, 200)
    np.testing.assert_allclose(found, expected, rtol=0, atol=1e-12 * np.max(N + excited))
    clear = expected > 1e-3 * N
    np.testing.assert_allclose(found[clear], expected[clear], rtol=1e-9, atol=0)
    np.testing.assert_array_equal(found[expected == 0], 0.0)


def test_points_without_an_answer_carry_their_words(large):
    missing = np.isnan(large.found["kappa_T"].value)
    told = np.zeros_like(missing)
    for reason in large.found["kappa_T"].reasons:
        assert "diverges" in reason.text
        told[tuple(reason.points.array.T)] = True
    np.testing.assert_array_equal(missing, told)
    assert missing.any()
    assert not missing.all()


@pytest.mark.parametrize("text", [LARGE, MIXED])
def test_chunks_cover_every_point_once(text):
    (question,) = eoscore.loads(text).program.questions
    covered = np.zeros([axis.points for axis in question.over], dtype=int)
    chunks = chunks_of(0, question)
    for chunk in chunks:
        covered[chunk.box] += 1
    assert (covered == 1).all()
    assert len(chunks) > 1
    assert sum(chunk.points for chunk in chunks) == covered.size


def test_the_first_name_runs_slowest_through_chunks():
    (answer,) = eoscore.loads(MIXED.replace("find T_c", "find N, f")).answers()
    assert answer.found["f"].value.shape == (3, 150, 2)
    meshes = np.meshgrid(*answer.over.values(), indexing="ij")
    np.testing.assert_array_equal(answer.found["f"].value, meshes[1])
    np.testing.assert_allclose(answer.found["N"].value, meshes[2], rtol=1e-15, atol=0)


def test_a_piece_comes_back_from_bytes_with_the_same_bits(large):
    lab = eoscore.loads(MIXED)
    run = Run(lab._recipe, lab.program, lab.held)
    run._answer_grid(0)
    for piece in run._pieces.values():
        again = unpacked(packed(piece))
        assert again.found.keys() == piece.found.keys()
        assert packed(again) == packed(piece)


def test_a_journal_belongs_to_one_run_and_one_question(tmp_path):
    one, other = eoscore.loads(MIXED), eoscore.loads(MIXED.replace("150", "151"))
    path = tmp_path / "chunks"
    one.answers(keep=path)
    with Journal(path, one._recipe, one.program) as journal:
        assert len(journal) == len(chunks_of(0, one.program.questions[0]))
        with pytest.raises(JournalBusyError, match="another run is writing"):
            Journal(path, one._recipe, one.program)
    with Journal(path, other._recipe, other.program) as journal:
        assert (len(journal), journal.stale) == (0, True)


def test_a_setting_makes_another_question(tmp_path):
    eoscore.loads(MIXED).answers(keep=tmp_path / "chunks")
    lab = eoscore.loads(MIXED, settings=["f=90 Hz"])
    with Journal(tmp_path / "chunks", lab._recipe, lab.program) as journal:
        assert len(journal) == 0


@pytest.mark.parametrize("lost", [1, 40, 5000])
def test_a_journal_that_was_cut_short_or_spoilt_gives_the_same_answer(tmp_path, lost):
    path = tmp_path / "chunks"
    (whole,) = eoscore.loads(MIXED).answers(keep=path)
    content = path.read_bytes()
    path.write_bytes(content[:-lost] if lost > 1 else content[:-1] + bytes([content[-1] ^ 1]))
    (again,) = eoscore.loads(MIXED).answers(keep=path)
    assert again.found["T_c"].value.tobytes() == whole.found["T_c"].value.tobytes()
    assert path.read_bytes() == content

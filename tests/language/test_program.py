"""From a right text to facts: values in SI, scopes, overrides, uncertain literals, resolved questions."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import constants as si

from eoscore.errors import NoAnswerError, PluginError, TarnError
from eoscore.language import read
from eoscore.language.facts import StatesFacts, TrapFacts, UniformFacts, VolumeFacts
from eoscore.language.units import Dimension

from .labs import BOX, DISPERSIONS, GAS, TRAP, near, program

U = si.physical_constants["atomic mass constant"][0]
HARMONIC = GAS + TRAP


def test_a_harmonic_trap_comes_out_in_si():
    binding = program(HARMONIC).bind("sr", "bowl")
    assert isinstance(binding.place, TrapFacts)
    assert binding.place.field.coordinates == ("r",)
    wanted = binding.gas.mass / 2 * (2 * np.pi * 100) ** 2 * 1e-10
    assert float(binding.place.field.formula.evaluate({"r": 1e-5})) == near(wanted)


def test_the_mass_of_an_isotope_is_that_of_the_neutral_atom():
    """Sr-84: 83.9134191(13) u, AME2020 (from memory)."""
    assert program(GAS).bind("sr", None).gas.mass == near(83.9134191 * U, rel=3e-8)


def test_what_a_gas_does_not_say_has_its_default():
    gas = program("gas a { m = 1 u }").bind("a", None).gas
    assert (gas.statistics, gas.degeneracy, gas.a_s, gas.treatment, gas.dispersion) == (
        "bose",
        1.0,
        None,
        None,
        "free",
    )


def test_a_gas_says_all_it_can():
    text = "gas a { m = 2 u\n statistics fermi\n degeneracy = 2\n a_s = -3 nm\n treatment hartree_fock\n"
    gas = program(text + "dispersion relativistic { antiparticles = 1 } }").bind("a", None).gas
    assert (gas.statistics, gas.degeneracy, gas.a_s) == ("fermi", 2.0, -3e-9)
    assert (gas.treatment, gas.dispersion, dict(gas.parameters)) == (
        "hartree_fock",
        "relativistic",
        {"antiparticles": 1},
    )


def test_parameters_have_defaults_and_may_borrow_the_name_of_the_gas():
    text = "gas a { m = 1 u\n omega_z = 2*pi*5 kHz\n dispersion trapped { omega_z = omega_z } }"
    assert program(text).bind("a", None).gas.parameters == {"omega_z": near(2 * np.pi * 5e3)}
    assert (
        program("gas a { m = 1 u\n dispersion relativistic }").bind("a", None).gas.parameters["antiparticles"]
        == 0
    )


def test_an_inline_energy_has_momenta_and_a_zone():
    energy = (
        program("gas a { E(px, py) = c*abs(px) + c*abs(py) where abs(px) < h/(1 um), py > 0 }")
        .bind("a", None)
        .gas.energy
    )
    assert energy.coordinates == ("px", "py")
    inside = [float(wall.evaluate({"px": 1e-28, "py": 1e-30})) > 0 for wall in energy.walls]
    assert inside == [True, True]


def test_walls_joined_by_and_are_walls_of_their_own():
    text = GAS + "trap t { V(x) = 0 where x > 0 and x < 1 mm or x < -1 m, x < 2 m and x > -3 m }"
    assert len(program(text).bind("sr", "t").place.field.walls) == 3


@pytest.mark.parametrize(
    ("text", "size", "dimension"), [("1 mm3", 1e-9, 3), ("20 mm2", 2e-5, 2), ("3 um", 3e-6, 1)]
)
def test_the_unit_of_a_volume_chooses_the_dimension(text, size, dimension):
    facts = program(GAS + f"trap t {{ volume = {text}\n E_max = k_B*1 uK }}").bind("sr", "t").place
    assert facts == VolumeFacts("t", near(size, rel=1e-15), dimension, near(si.k * 1e-6))


def test_states_by_formula_or_by_anchor():
    formula = "states s { a = 1.65(5)\n A = 1/(k_B*90 nK)^a\n rho(E) = A*E^(a - 1) }\n"
    anchored = "states t { exponent = 1.65(5)\n anchor N_c = 3.0(2)e5 at T = 90 nK }"
    lab = program(GAS + formula + anchored)
    density = lab.bind("sr", "s").place.density
    assert float(density.evaluate({"E": si.k * 90e-9})) == near(1 / (si.k * 90e-9))
    assert lab.bind("sr", "t").place == StatesFacts("t", None, 1.65, 3e5, near(9e-8, rel=1e-15))


def test_the_unbounded_place_is_always_there():
    assert program(GAS).bind("sr", "uniform").place == UniformFacts()


# Who sees what ---------------------------------------------------------------------------------------------


def test_a_block_sees_itself_then_the_gas_then_the_file_then_the_constants():
    outer = "w = 1\nv = 1\nu = 1\ngas a { m = 1 u\n w = 2\n v = 2 }\n"
    text = outer + "trap t { volume = 1 m3\n w = 3\n sum = w + 10*v + 100*u }"
    assert program(text).bind("a", "t").value("sum")[0] == 123.0


def test_a_trap_takes_the_names_of_the_gas_it_is_asked_with():
    gases = "gas a { m = 1 u\n k = 1 }\ngas b { m = 2 u\n k = 5 }\n"
    text = gases + "trap t { volume = 1 m3\n j = 2*k }"
    lab = program(text)
    assert [lab.bind(gas, "t").value("j")[0] for gas in "ab"] == [2.0, 10.0]


def test_the_names_of_a_file_do_not_see_the_blocks():
    with pytest.raises(TarnError, match="`k` is not known here"):
        program("j = 2*k\ngas a { m = 1 u\n k = 1 }")


def test_arguments_hide_every_other_name():
    assert (
        program("pi2 = f(3)\nx = 100\nf(x) = 2*x\ngas a { m = 1 u }").bind("a", None).value("pi2")[0] == 6.0
    )


def test_a_constant_may_be_hidden():
    value, dimension = program("e = 2 m\nd = 2*e\ngas a { m = 1 u }").bind("a", None).value("d")
    assert (value, dimension) == (4.0, Dimension.of(m=1))


def test_an_unknown_name_has_no_value():
    binding = program(HARMONIC).bind("sr", "bowl")
    assert binding.names == ("f", "m")
    with pytest.raises(TarnError, match="`g` has no value in bowl with sr"):
        binding.value("g")
    with pytest.raises(TarnError, match="there is no gas `rb`"):
        program(HARMONIC).bind("rb", "bowl")
    with pytest.raises(TarnError, match="there is no name `g` to give a value"):
        program(HARMONIC).bind("sr", "bowl", {"g": 1.0})


# Other values ----------------------------------------------------------------------------------------------

LAB = (
    GAS
    + "P = 2.0(1) W\ntrap t { Q = 3*P\n R = 5.0(2) m\n volume = R*(1 m2) }\ntrap s { volume = 4.0(3) m3\n K = 1 }\n"
)


def test_a_new_value_flows_through_what_is_made_of_it():
    assert program(LAB).bind("sr", "t", {"P": 7.0}).value("Q")[0] == 21.0
    assert program(LAB).bind("sr", "t", {"Q": 1.0}).value("Q")[0] == 1.0


def test_a_value_for_another_place_is_passed_over():
    assert program(LAB).bind("sr", "t", {"K": 7.0}).value("Q")[0] == 6.0


@pytest.mark.parametrize(
    ("values", "why"),
    [
        ({"R": -1.0}, "`volume` must be above 0, with the values given it is -1 in SI"),
        ({"R": np.inf}, "`volume` has no finite value with the values given"),
    ],
)
def test_a_senseless_value_is_told_when_it_is_used(values, why):
    binding = program(LAB).bind("sr", "t", values)
    with pytest.raises(NoAnswerError, match=why):
        _ = binding.place


def test_a_value_that_makes_a_field_infinite_is_told_with_its_place():
    binding = program(GAS + "trap t { w = 2 m\n V(x) = if(w > 1 m, 1, 2)*(1 J)*x/w }").bind(
        "sr", "t", {"w": 0.0}
    )
    with pytest.raises(NoAnswerError, match="in line 3 has no finite value"):
        _ = binding.place


def test_a_question_with_a_senseless_value_is_a_complaint():
    with pytest.raises(TarnError, match="`volume` must be above 0") as caught:
        program(LAB + "find Q for sr in t with P = 3 W, R = 0 m")
    assert caught.value.complaints[0].column == len("find Q for sr in t with ") + 1


def test_uncertain_literals_are_variables_in_the_order_of_the_text():
    lab = program(LAB + "find Q for sr in t with R = 4.0(5) m")
    known = [(each.index, each.value, each.sigma, each.name, each.span.text) for each in lab.literals]
    assert known == [
        (0, 2.0, 0.1, "P", "2.0(1) W"),
        (1, 5.0, 0.2, "R", "5.0(2) m"),
        (2, 4.0, 0.3, "volume", "4.0(3) m3"),
        (3, 4.0, 0.5, "R", "4.0(5) m"),
    ]
    assert [each.index for each in lab.literals_of(lab.questions[0])] == [0, 1, 3]


def test_a_literal_at_another_value_moves_all_that_share_its_name():
    binding = program(LAB).bind("sr", "t", literals={0: 2.5, 1: 6.0})
    assert binding.value("Q")[0] == 7.5
    assert binding.place.volume == 6.0


def test_conditions_follow_the_literals_too():
    lab = program(LAB + "find T_c for sr in t with N = 1.0(1)e5*P/(1 W), R = 2*R")
    question = lab.questions[0]
    assert lab.conditions(question) == ({"N": 2e5}, {"R": 10.0})
    assert lab.conditions(question, {0: 3.0, 1: 7.0}) == ({"N": 3e5}, {"R": 14.0})


# Questions and settings ------------------------------------------------------------------------------------


def test_a_question_knows_its_grid_and_its_dimension():
    text = "find depth, T_c for sr in bowl with N = 2e5 over f = geometric(10 Hz, 1 kHz, 3), T = [1 nK, 3 nK]"
    (question,) = program(HARMONIC + text).questions
    assert [axis.name for axis in question.over] == ["f", "T"]
    assert question.over[0].values == pytest.approx([10.0, 100.0, 1000.0])
    assert question.over[1].values == pytest.approx([1e-9, 3e-9], abs=0)
    assert (question.verb, question.place, question.dimension, question.line) == ("find", "bowl", 3, 4)


@pytest.mark.parametrize(("density", "dimension"), [("1 m-3", 3), ("1 cm-2", 2), ("1 mm-1", 1)])
def test_the_unit_of_a_density_chooses_the_dimension(density, dimension):
    (question,) = program(GAS + f"find T_c for sr in uniform with n = {density}").questions
    assert question.dimension == dimension


def test_a_gas_that_holds_itself_needs_no_place():
    text = "gas a { m = 1 u\n dispersion trapped { omega_x = 1 kHz\n omega_y = 1 kHz } }\nfind T_c for a with N = 10"
    assert program(text).questions[0].place is None


def test_a_mass_is_needed_only_where_something_uses_it():
    states = "states s { exponent = 2\n anchor N_c = 10 at T = 1 K }\n"
    assert program("gas a { statistics bose }\n" + states + "find T_c for a in s with N = 3").questions
    assert program("gas a { E(p) = c*p }\n" + BOX + "find T_c for a in box with N = 3").questions


def test_settings_take_the_place_of_what_the_file_says():
    text = HARMONIC + "find T_c for sr in bowl with N = 2e5"
    lab = program(text, settings=["f=50 Hz", "N = 1e3", "m=90 u"])
    binding = lab.bind("sr", "bowl")
    assert (binding.value("f")[0], binding.gas.mass) == (50.0, near(90 * U))
    assert lab.conditions(lab.questions[0]).given == {"N": 1e3}


@pytest.mark.parametrize(
    ("setting", "message"),
    [
        ("f", "--set 'f'"),
        ("f=", "--set 'f='"),
        ("f(x)=2", "sets no value"),
        ("find f for sr in bowl", "sets no value"),
        ("g=3 Hz", "nothing in the file is called `g`"),
        ("f=3 m", "`f` is 1/s .Hz. in the file, but is set to m"),
        ("f=2*f", "a name cannot need itself"),
        ("", "sets no value"),
    ],
)
def test_a_bad_setting_is_a_complaint(setting, message):
    with pytest.raises(TarnError, match=message):
        program(HARMONIC, settings=[setting])


def test_a_refused_plugin_is_told_where_it_is_asked_for():
    class Refusing(dict):
        def __missing__(self, name):
            raise PluginError(name, "no energy", "an energy")

    with pytest.raises(
        TarnError, match="plugin 'odd' is refused: found no energy; wanted an energy"
    ) as caught:
        read("gas a { m = 1 u\n dispersion odd }", dispersions=Refusing(DISPERSIONS))
    assert (caught.value.complaints[0].line, caught.value.complaints[0].column) == (2, 13)

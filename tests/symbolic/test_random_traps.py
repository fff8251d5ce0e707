"""Random quasi-homogeneous traps: the formula of T_c against the numerical engine, which shares no code with it."""

from hypothesis import given, settings
from hypothesis import strategies as st

import eoscore

SCALE = st.floats(0.3, 3.0).map(lambda x: round(x, 2))
EXPONENT = st.sampled_from(["1", "1.5", "2", "3", "4", "6"])
SHAPES = st.sampled_from(
    [
        "abs(x/a)^{0} + abs(y/a)^{1} + abs(z/a)^{2}",
        "((x^2 + {s}*y^2)/a^2)^{0} + abs(z/a)^{1}",
        "(abs(x/a)^{0} + {s}*abs(y/a)^{0} + abs(z/a)^{1})^{2}",
        "((x^2 + y^2 + {s}*z^2)/a^2)^{2}",
    ]
)


@settings(max_examples=8, derandomize=True, deadline=None)
@given(SHAPES, st.tuples(EXPONENT, EXPONENT, EXPONENT), SCALE)
def test_the_formula_of_a_random_trap_equals_the_engine(shape, exponents, scale):
    shape = shape.format(*exponents, s=scale)
    text = (
        "gas strontium { isotope Sr-84 }\n"
        f"trap random {{ a = 7 um\n U = k_B*80 nK\n V(x, y, z) = U*({shape}) }}\n"
        "derive T_c for strontium in random with N = 1e5\n"
    )
    (answer,) = eoscore.loads(text).answers()
    entry = answer.formulas["T_c"]
    assert entry["closed"], shape
    assert entry["difference"] < 1e-10, shape

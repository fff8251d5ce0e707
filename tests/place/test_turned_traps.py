"""Two beams that cross, turned in their plane: nothing that they hold changes by that."""

import math

import pytest

import eoscore

TEXT = """
gas strontium {{ isotope Sr-84 }}
trap crossed {{
    zR = pi*w^2 / (1064 nm)
    w = 55 um
    U = k_B * 17 uK
    c1 = {c1!r}
    s1 = {s1!r}
    c2 = {c2!r}
    s2 = {s2!r}
    beam(d2, l) = U / (1 + (l/zR)^2) * exp(-2*d2/(w^2*(1 + (l/zR)^2)))
    first(x, y, z) = beam((c1*y - s1*x)^2 + z^2, c1*x + s1*y)
    second(x, y, z) = beam((c2*y - s2*x)^2 + z^2, c2*x + s2*y)
    V(x, y, z) = -first(x, y, z) - 0.8*second(x, y, z) + m*g_n*z
}}
find N_c, depth for strontium in crossed with T = 2.5 uK, mu = 0 J
"""


def held(angle, between):
    """N_c with the first beam at an angle to x, the second at another to the first, degrees."""
    one, two = math.radians(angle), math.radians(angle + between)
    text = TEXT.format(c1=math.cos(one), s1=math.sin(one), c2=math.cos(two), s2=math.sin(two))
    found = eoscore.loads(text).answers()[0].found
    return float(found["N_c"].value), float(found["N_c"].error), float(found["depth"].value)


@pytest.mark.parametrize(("between", "turned"), [(90, 37), (60, 17), (12, 71)])
def test_turning_changes_nothing(between, turned):
    number, error, depth = held(0, between)
    other, slack, same = held(turned, between)
    assert same == pytest.approx(depth, rel=1e-10, abs=0)
    assert abs(other - number) <= error + slack
    assert error < 1e-3 * number  # an error of any size would hold

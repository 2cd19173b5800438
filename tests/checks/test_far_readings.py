"""Far readings against published tables and data sets of Grubbs and of generalised ESD."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from meanlab.checks.far_readings import distances, esd_critical, far_places, grubbs_critical, grubbs_p

URANIUM = [199.31, 199.53, 200.19, 200.82, 201.92, 201.95, 202.18, 245.57]
WIRES = [568, 570, 570, 570, 572, 572, 572, 578, 584, 596]
VENUS = [-1.4, -0.44, -0.3, -0.24, -0.22, -0.13, -0.05, 0.06, 0.1, 0.18, 0.2, 0.39, 0.48, 0.63, 1.01]
COPPER = [2.9, 3.1, 3.4, 3.4, 3.7, 3.7, 2.8, 2.5, 2.4, 2.4, 2.7, 2.2]
COPPER += [5.28, 3.37, 3.03, 3.03, 28.95, 3.77, 3.4, 2.2, 3.5, 3.6, 3.7, 3.7]
# Rosner 1983, Technometrics 25:165 (vitamin E in 54 women); NIST/SEMATECH e-Handbook 1.3.5.17.3, from memory
ROSNER = [-0.25, 0.68, 0.94, 1.15, 1.20, 1.26, 1.26, 1.34, 1.38, 1.43, 1.49, 1.49, 1.55, 1.56, 1.58, 1.65, 1.69, 1.70]
ROSNER += [1.76, 1.77, 1.81, 1.91, 1.94, 1.96, 1.99, 2.06, 2.09, 2.10, 2.14, 2.15, 2.23, 2.24, 2.26, 2.35, 2.37, 2.40]
ROSNER += [2.47, 2.54, 2.62, 2.64, 2.90, 2.92, 2.92, 2.93, 3.21, 3.26, 3.30, 3.59, 3.68, 4.30, 4.64, 5.34, 5.42, 6.01]
ROSNER_R = [3.118, 2.942, 3.179, 2.810, 2.815, 2.848, 2.279, 2.310, 2.101, 2.067]
ROSNER_CRITICAL = [3.158, 3.151, 3.143, 3.136, 3.128, 3.120, 3.111, 3.103, 3.094, 3.085]

# ISO 5725-2:1994 table 5, one value, 5 % two-sided: printed from memory, computed in closed form at 50 digits
GRUBBS_TWO_SIDED = {
    3: (1.155, 1.1543048513440384),
    4: (1.481, 1.48125),
    5: (1.715, 1.7150373123433638),
    6: (1.887, 1.8871451177839331),
    7: (2.020, 2.019968507679597),
    8: (2.126, 2.1266450871954654),
    9: (2.215, 2.215004223325533),
    10: (2.290, 2.2899540844796005),
    12: (2.412, 2.4115595184316523),
    15: (2.549, 2.548307771743344),
    20: (2.709, 2.7082456458057544),
}


@pytest.mark.parametrize(("n", "printed", "computed"), [(n, *values) for n, values in GRUBBS_TWO_SIDED.items()])
def test_two_sided_critical_values_of_grubbs(n, printed, computed):
    """The two-sided 5 % critical values are those of ISO 5725-2 table 5."""
    found = grubbs_critical(n, 0.025)
    assert found == pytest.approx(computed, rel=1e-9)
    assert found == pytest.approx(printed, abs=1e-3)


@pytest.mark.parametrize(("n", "one_sided"), [(8, 2.0316520015499435), (10, 2.1760683941942216)])
def test_one_sided_critical_values_are_others(n, one_sided):
    """One-sided 5 % values (NIST 1.3.5.17.1: 2.032 at n = 8; ASTM E178: 2.18 at n = 10) are smaller than two-sided."""
    assert grubbs_critical(n, 0.05) == pytest.approx(one_sided, rel=1e-9)
    assert grubbs_critical(n, 0.05) < grubbs_critical(n, 0.025)


@pytest.mark.parametrize(
    ("source", "readings", "G"),
    [
        ("NIST/SEMATECH e-Handbook 1.3.5.17.1 (Tietjen & Moore 1972)", URANIUM, 2.4687646112124506),
        ("Grubbs 1969, copper wires, printed 2.39", WIRES, 2.390120510839993),
        ("Grubbs 1969, Venus, printed 2.573", VENUS, 2.573737071634758),
    ],
)
def test_G_of_published_readings(source, readings, G):
    """G = max|x − x̄|/s of published readings is the value computed at 50 digits."""
    assert float(distances(np.array(readings, dtype=float)).max()) == pytest.approx(G, rel=1e-12)


def test_p_of_the_uranium_readings():
    """The two-sided p of NIST's mass-spectrometer readings is 3.0026e-07 (50 digits)."""
    assert grubbs_p(2.4687646112124506, 8) == pytest.approx(3.0026386820708375e-07, rel=1e-8)


@pytest.mark.parametrize("n", range(4, 15))
def test_p_is_the_level_at_the_critical_value(n):
    """p and critical value are the same statement: p(critical value) = level."""
    for level in (0.05, 0.01):
        assert grubbs_p(grubbs_critical(n, level / 2), n) == pytest.approx(level, rel=1e-9)


def test_p_stays_between_0_and_1():
    """p is 1 for a small G, and 0 at the largest G there can be, (n − 1)/√n."""
    assert grubbs_p(0.9, 6) == 1.0
    assert grubbs_p(5 / 6**0.5, 6) == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize(
    ("readings", "expected"),
    [(URANIUM, [7]), (WIRES, [9]), (VENUS, [0]), (COPPER, [16, 12])],
    ids=["uranium", "wires", "Venus", "copper"],
)
def test_flagged_readings_of_published_sets(readings, expected):
    """NIST flags the last uranium reading, Grubbs 1969 the last wire and the first of Venus; 28.95 is far in copper."""
    flagged = far_places(np.array(readings, dtype=float))
    assert flagged[0] == expected[0]
    assert set(flagged) <= set(expected)


def test_generalised_esd_on_rosners_readings():
    """R₁…R₁₀ and λ₁…λ₁₀ are those NIST prints for Rosner's 54 readings, and three are far: R₃ alone exceeds its λ."""
    x = np.array(ROSNER)
    assert esd_critical(54, 10, 0.025) == pytest.approx(ROSNER_CRITICAL, abs=1.1e-3)
    left, found = np.arange(54), []
    for _ in range(10):
        away = distances(x[left])
        found.append(float(away.max()))
        left = np.delete(left, int(np.argmax(away)))
    assert found == pytest.approx(ROSNER_R, abs=1.1e-3)
    assert [ROSNER[place] for place in far_places(x)] == [6.01, 5.42, 5.34]


def test_esd_critical_values_by_scipy():
    """λᵢ computed from scipy.stats.t are the same for n = 15 to 100 (Rosner 1983)."""
    for n in (15, 25, 50, 100):
        for i, bound in enumerate(esd_critical(n, n // 5, 0.025), 1):
            t = stats.t.ppf(1 - 0.025 / (n - i + 1), n - i - 1)
            assert bound == pytest.approx((n - i) * t / ((n - i - 1 + t * t) * (n - i + 1)) ** 0.5, rel=1e-10)


def test_two_equal_far_readings_hide_each_other_from_grubbs():
    """Up to about ten readings two equal far ones are not found (masking), which the message says."""
    x = np.array([1.00, 1.01, 1.02, 0.99, 1.01, 1.00, 5.0, 5.0])
    assert far_places(x) == []


def test_two_equal_far_readings_are_found_by_generalised_esd():
    """From fifteen readings on two equal far ones are both found, though R₁ alone would not reject."""
    x = np.concatenate([np.linspace(0.9, 1.1, 14), [3.0, 3.0]])
    assert sorted(far_places(x)) == [14, 15]


@settings(max_examples=80, deadline=None)
@given(st.lists(st.integers(-50, 50), min_size=4, max_size=25), st.floats(0.001, 1000), st.floats(-1e3, 1e3))
def test_flags_do_not_depend_on_origin_and_scale(steps, scale, shift):
    """Which readings are far does not change with unit or origin."""
    x = np.array(steps, dtype=float)
    if np.ptp(x) == 0:
        return
    assert float(distances(shift + scale * x).max()) == pytest.approx(float(distances(x).max()), rel=1e-6)
    moved = far_places(2.0 * x + 64.0)  # exact in doubles, so that ties stay ties
    assert moved == far_places(x)

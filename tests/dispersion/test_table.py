"""Tables: every layout read, every fault named with its line, interpolation that stays within the rows."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from mixsim.dispersion import Table, interpolate, interpolate_permeability, read_table
from mixsim.errors import Refusal
from mixsim.units import spectral_from

MINUS, PLUS = "# convention: exp(-iwt)\n", "# convention: exp(+iwt)\n"
LOSSY = [(1.5 + 0.1j) ** 2, (1.6 + 0.2j) ** 2]


@pytest.mark.parametrize(
    ("text", "unit", "expected"),
    [
        (MINUS + "wavelength [nm], n, k\n600, 1.5, 0.1\n500, 1.6, 0.2\n", "nm", LOSSY),
        (PLUS + "wavelength [nm], n, k\n600, 1.5, -0.1\n500, 1.6, -0.2\n", "nm", LOSSY),
        (MINUS + "wavelength [um], k [-], n [1]\n0.5,.2,1.6\n.6,.1,1.5\n", "µm", LOSSY),
        (MINUS + "frequency [THz]; n; k\n1;1.5;1e-1\n2;1.6;+2E-1\n", "THz", LOSSY),
        (MINUS + "frequency [THz]; n; k\n1;1,5;1,0e-1\n2;1,6;,2\n", "THz", LOSSY),
        (MINUS + "frequency [THz]\tn\tk\n1\t1,5\t0,1\n2\t1,6\t0,2\n", "THz", LOSSY),
        (
            PLUS + "angular_frequency [rad/s], permittivity_real, conductivity [uS/cm]\n"
            "1e9, 4, 88.541878188\n2e9, 5, 0\n",
            "rad/s",
            [4 + 1j, 5],
        ),
        (MINUS + "wavenumber [cm^-1]\tn\tk\n1\t1.5\t0.1\n2\t1.6\t0.2\n", "cm^-1", LOSSY),
        (MINUS + "photon_energy [eV], n\n1, 1.5\n2, 1.6\n", "eV", [2.25, 2.56]),
        (
            MINUS + "angular_frequency [rad/s], permittivity_real, permittivity_imag\n1,4,1\n2,-5,0\n",
            "rad/s",
            [4 + 1j, -5],
        ),
        (
            PLUS + "frequency [GHz], permittivity_real, permittivity_imag\n1,4,-1\n2,-5,0\n",
            "GHz",
            [4 + 1j, -5],
        ),
        (MINUS + "frequency [GHz], permittivity_real, loss_tangent\n1,4,0.25\n2,5,0\n", "GHz", [4 + 1j, 5]),
        (PLUS + "frequency [GHz], loss_tangent, permittivity_real\n1,0.25,4\n2,0,5\n", "GHz", [4 + 1j, 5]),
        (
            "\ufeff# a note\n#Convention : exp( − i ω t )\n\n"
            + '"frequency [GHz]","n"\n1,1.5\n# gap\n2,1.6\n\n',
            "GHz",
            [2.25, 2.56],
        ),
        ("frequency [GHz], n\r\n# CONVENTION = EXP(-jwt)\r\n1, 1.5\r\n2, 1.6", "GHz", [2.25, 2.56]),
    ],
)
def test_layouts(text: str, unit: str, expected: list[complex]) -> None:
    table = read_table(text)
    assert np.all(np.diff(table.omega) > 0)
    np.testing.assert_allclose(table.permittivity, expected, rtol=1e-14)
    assert not np.signbit(table.permittivity.imag).any()
    assert unit in table.range_written and table.source == "text"
    assert table.convention == ("exp(+iwt)" if text.startswith(PLUS) else "exp(-iwt)")
    with pytest.raises(ValueError, match="read-only"):
        table.omega[0] = 1.0


def test_file_with_byte_order_mark(tmp_path: Path) -> None:
    file = tmp_path / "film.csv"
    file.write_bytes(
        b"\xef\xbb\xbf" + (MINUS + "wavelength [nm], n, k\n500, 1.6, 0.2\n600, 1.5, 0.1\n").encode()
    )
    table = read_table(file)
    assert (table.source, table.unit, table.columns) == ("film.csv", "nm", ("n", "k"))
    assert table.range_written == "500 nm to 600 nm"
    np.testing.assert_allclose(table.omega, spectral_from(np.array([600.0, 500.0]), "nm"), rtol=1e-15)


HEADER = MINUS + "wavelength [nm], n\n"
BAD = [
    ("empty", b"", "line 1: it is empty", "at least two rows", None),
    ("blank", b"\n \n", "line 1: it is empty", "at least two rows", None),
    ("comments alone", MINUS, "line 1: comments only", "a header", None),
    ("binary", b"# convention\n\x00\x01", "line 2: it is binary", "plain text", None),
    ("latin-1", b"# na\xefve\n", "line 1: it is not UTF-8", "UTF-8", None),
    ("utf-16", "wavelength".encode("utf-16"), "line 1: it is not UTF-8", "UTF-8", None),
    ("no header", MINUS + "400, 1.5\n500, 1.6\n", "line 2: no header row", "'wavelength [nm], n, k'", None),
    ("no convention", "wavelength [nm], n\n1,2\n2,2\n", "line 1: no convention", "exp(-iwt)", None),
    (
        "half a convention",
        "# convention: exp(iwt)\nwavelength [nm], n\n1,2\n2,2\n",
        "line 1: convention",
        "+iwt",
        None,
    ),
    ("two conventions", MINUS + PLUS + "wavelength [nm], n\n1,2\n2,2\n", "line 2: both", "exp(-iwt)", None),
    (
        "unknown axis",
        MINUS + "wavelenght [nm], n\n1,2\n2,2\n",
        "line 2: first column",
        "wavenumber",
        "wavelength",
    ),
    ("axis without unit", MINUS + "wavelength, n\n1,2\n2,2\n", "line 2: no unit", "'wavelength [nm]'", None),
    (
        "unit of another axis",
        MINUS + "wavelength [GHz], n\n1,2\n2,2\n",
        "of a frequency",
        "nm",
        "frequency [GHz]",
    ),
    (
        "unit of another kind",
        MINUS + "wavelength [kg], n\n1,2\n2,2\n",
        "'kg' (for a mass)",
        "takes nm, µm",
        None,
    ),
    ("unit misspelt", MINUS + "frequency [Ghz], n\n1,2\n2,2\n", "line 2: unit 'Ghz'", "takes Hz", "GHz"),
    (
        "unit with an index",
        MINUS + "wavelength [nm], n [nm]\n1,2\n2,2\n",
        "line 2: unit 'nm'",
        "no unit",
        None,
    ),
    ("broken heading", MINUS + "wavelength [nm, n\n1,2\n2,2\n", "line 2: heading", "brackets", None),
    (
        "unknown column",
        MINUS + "wavelength [nm], permitivity_real, loss_tangent\n1,2,0\n2,2,0\n",
        "line 2: unknown column 'permitivity_real'",
        "columns are n, k",
        "permittivity_real",
    ),
    (
        "unfit columns",
        MINUS + "wavelength [nm], n, loss_tangent\n1,2,0\n",
        "line 2: n, loss_tangent",
        "n and k",
        None,
    ),
    (
        "column twice",
        MINUS + "wavelength [nm], n, n\n1,2,2\n",
        "line 2: column 'n' stands twice",
        "once",
        None,
    ),
    ("axis alone", MINUS + "wavelength [nm]\n1\n2\n", "line 2: nothing beside the axis", "n and k", None),
    ("no rows", HEADER, "line 2: no rows", "at least two", None),
    ("one row", HEADER + "400, 1.5\n", "line 3: one row", "at least two", None),
    (
        "a cell short",
        HEADER + "400, 1.5\n500\n",
        "line 4: 1 cells (500) below a header of 2",
        "one cell",
        None,
    ),
    (
        "decimal comma",
        HEADER + "400, 1,47\n500, 1,48\n",
        "line 3: 3 cells (400, 1, 47)",
        "(1.47, not 1,47)",
        None,
    ),
    (
        "quoted decimal comma",
        HEADER + '400, "1,47"\n500, "1,48"\n',
        "line 3: '1,47' has a decimal comma",
        "(1.47, not 1,47)",
        "1.47",
    ),
    (
        "a comma between thousands",
        MINUS + "wavelength [nm]; n\n900; 1.47\n1,500; 1.48\n",
        "line 4: '1,500' has a decimal comma, and '1.47' elsewhere a point",
        "one decimal sign throughout",
        None,
    ),
    (
        "a conductivity without unit",
        MINUS + "frequency [GHz], permittivity_real, conductivity\n1, 4, 1\n2, 4, 1\n",
        "line 2: no unit for 'conductivity'",
        "S/m, S/cm, mS/m, µS/cm",
        "conductivity [S/m]",
    ),
    (
        "a conductivity in siemens",
        MINUS + "frequency [GHz], permittivity_real, conductivity [S]\n1, 4, 1\n2, 4, 1\n",
        "line 2: unit 'S' for column 'conductivity'",
        "it takes S/m",
        "conductivity [S/m]",
    ),
    ("a word", HEADER + "400, 1.5\n500, high\n", "line 4: 'high'", "a number", None),
    ("an empty cell", HEADER + "400, 1.5\n500,\n", "line 4: an empty cell", "a number", None),
    ("an underscore", HEADER + "400, 1_5\n500, 1.5\n", "line 3: '1_5'", "a number", None),
    ("nan", HEADER + "400, 1.5\n500, NaN\n", "line 4: 'NaN' is not finite", "leave out", None),
    ("inf", HEADER + "400, -inf\n500, 1.5\n", "line 3: '-inf' is not finite", "leave out", None),
    ("too large", HEADER + "400, 1e200\n500, 1.5\n", "line 3: 400, 1e200", "too large", None),
    ("overflowing", HEADER + "400, 1e999\n500, 1.5\n", "line 3: 400, 1e999", "too large", None),
    ("axis at zero", HEADER + "0, 1.5\n500, 1.5\n", "line 3: '0' on the axis", "above 0", None),
    (
        "a point twice",
        HEADER + "400, 1.5\n\n400.0, 1.6\n500, 1.5\n",
        "line 5: '400.0' stands twice",
        "once",
        None,
    ),
    (
        "out of order",
        HEADER + "400, 1.5\n500, 1.6\n450, 1.5\n600, 1.5\n",
        "line 5: '450'",
        "rise or fall",
        None,
    ),
]


@pytest.mark.parametrize(
    ("content", "found", "allowed", "suggestion"), [case[1:] for case in BAD], ids=[case[0] for case in BAD]
)
def test_bad_tables_are_refused_with_the_line(
    tmp_path: Path, content: bytes | str, found: str, allowed: str, suggestion: str | None
) -> None:
    file = tmp_path / "bad.csv"
    file.write_bytes(content if isinstance(content, bytes) else content.encode())
    with pytest.raises(Refusal) as caught:
        read_table(file)
    assert caught.value.found.startswith("line ")
    assert found in caught.value.found and allowed in caught.value.allowed
    assert caught.value.suggestion == suggestion


def test_overlong_cell_and_missing_file(tmp_path: Path) -> None:
    with pytest.raises(Refusal, match="line 3: "):
        read_table(HEADER + "4" * 200_000 + ", 1.5\n")
    with pytest.raises(FileNotFoundError):
        read_table(tmp_path / "absent.csv")


SPECTRUM = read_table(
    MINUS
    + "wavelength [nm], permittivity_real, permittivity_imag\n"
    + "400, 2.1, 0\n450, 2.9, 0.4\n500, 2.6, 0.1\n600, 2.4, 0\n700, 2.4, 0\n"
)


def test_interpolation_passes_through_the_rows_and_takes_any_shape() -> None:
    at_rows = interpolate(SPECTRUM.omega, table=SPECTRUM)
    np.testing.assert_allclose(at_rows, SPECTRUM.permittivity, rtol=1e-15)
    alone = interpolate(spectral_from(450.0, "nm"), table=SPECTRUM)
    assert isinstance(alone, np.complex128) and alone == pytest.approx(2.9 + 0.4j, rel=1e-12)
    omega = spectral_from(np.array([[401.0, 455.0], [np.nan, 640.0]]), "nm")
    omega.setflags(write=False)
    grid = interpolate(omega, table=SPECTRUM)
    assert grid.shape == (2, 2)
    np.testing.assert_array_equal(np.isnan(grid), np.isnan(omega))
    assert grid[1, 1] == pytest.approx(2.4)
    assert interpolate([], table=SPECTRUM).shape == (0,)


def test_interpolation_reproduces_a_smooth_spectrum() -> None:
    wavelengths = np.linspace(400.0, 700.0, 61)
    rows = "".join(f"{nm!r},{1.46 + 3.4e3 / nm**2!r}\n" for nm in wavelengths.tolist())
    table = read_table(HEADER + rows)
    between = wavelengths[:-1] + 2.5
    value = interpolate(spectral_from(between, "nm"), table=table)
    np.testing.assert_allclose(value, (1.46 + 3.4e3 / between**2) ** 2, rtol=2e-7)


@given(
    st.lists(st.tuples(st.floats(-9, 9), st.just(0.0) | st.floats(1e-9, 9)), min_size=2, max_size=6),
    st.lists(st.floats(0, 1), min_size=1, max_size=8),
)
def test_interpolation_stays_between_neighbouring_rows(
    rows: list[tuple[float, float]], places: list[float]
) -> None:
    permittivity = np.array([complex(*row) for row in rows])
    omega = np.arange(1.0, len(rows) + 1.0) ** 1.5
    table = Table(
        omega, permittivity, "rad/s", ("permittivity_real", "permittivity_imag"), "exp(-iwt)", "text"
    )
    w = omega[0] + np.array(places) * (omega[-1] - omega[0])
    value = interpolate(w, table=table)
    right = np.clip(np.searchsorted(omega, w, side="right"), 1, len(omega) - 1)
    for part in (np.real, np.imag):
        a, b = part(permittivity[right - 1]), part(permittivity[right])
        assert np.all(part(value) >= np.minimum(a, b)) and np.all(part(value) <= np.maximum(a, b))
    assert np.all(value.imag >= 0.0)


@pytest.mark.parametrize(
    ("omega", "asked"),
    [
        (spectral_from(399.0, "nm"), "399 nm"),
        ([spectral_from(500.0, "nm"), spectral_from(2500.0, "nm")], "2500 nm"),
        (0.0, "inf nm"),
        (np.inf, "0 nm"),
    ],
)
def test_outside_the_table_is_refused_in_its_own_unit(omega: object, asked: str) -> None:
    with pytest.raises(Refusal, match="it covers 400 nm to 700 nm") as caught:
        interpolate(omega, table=SPECTRUM)  # type: ignore[arg-type]
    assert caught.value.found == f"{asked} lies outside the table text"


@pytest.mark.parametrize(
    ("sign", "text"),
    [
        (
            MINUS,
            "permittivity_real, permittivity_imag, permeability_real, "
            "permeability_imag\n1,4,1,2,0.5\n2,5,0,1,0\n",
        ),
        (
            PLUS,
            "permeability_imag, permittivity_real, permittivity_imag, "
            "permeability_real\n1,-0.5,4,-1,2\n2,0,5,0,1\n",
        ),
        (
            MINUS,
            "permittivity_real, loss_tangent, permeability_real, "
            "magnetic_loss_tangent\n1,4,0.25,2,0.25\n2,5,0,1,0\n",
        ),
    ],
)
def test_permeability_beside_permittivity(sign: str, text: str) -> None:
    table = read_table(f"{sign}frequency [GHz], {text}")
    assert table.permittivity.tolist() == [4 + 1j, 5]
    assert table.permeability is not None and table.permeability.tolist() == [2 + 0.5j, 1]
    assert not table.permeability.flags.writeable
    middle = interpolate_permeability(1.5 * table.omega[0], table=table)
    assert 1.0 < middle.real < 2.0 and 0.0 < middle.imag < 0.5


def test_an_index_beside_a_permeability_is_of_both() -> None:
    """n² = εμ."""
    table = read_table(MINUS + "frequency [GHz], n, k, permeability_real, permeability_imag\n"
                       "1, 3, 0.5, 2, 0.5\n2, 3, 0, 1.5, 0\n")  # fmt: skip
    assert table.permittivity[0] == pytest.approx((3 + 0.5j) ** 2 / (2 + 0.5j))
    assert table.permittivity[1] == pytest.approx(6.0)


def test_columns_that_follow_from_others_are_skipped() -> None:
    """Whatever they hold, an empty cell too; their cells are counted nevertheless."""
    head = "frequency [GHz], permittivity_real, permittivity_imag, n, absorption [1/m], loss_tangent\n"
    table = read_table(MINUS + head + "1, 4, 1, -7, , 0.25\n2, 5, 0, 2, x, 0\n")
    assert table.permittivity.tolist() == [4 + 1j, 5]
    assert table.columns == ("permittivity_real", "permittivity_imag")
    with pytest.raises(Refusal, match="line 4: 5 cells"):
        read_table(MINUS + head + "1, 4, 1, 2, 1, 0\n2, 5, 0, 2, 0\n")
    with pytest.raises(Refusal, match="permittivity_real, n beside the axis"):
        read_table(MINUS + "frequency [GHz], permittivity_real, n\n1, 4, 2\n2, 4, 2\n")


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("n, k, permeability_real\n1,2,0,1\n2,2,0,1\n", "n, k, permeability_real beside the axis"),
        ("n, u(k)\n1,2,1\n2,2,1\n", "'u\\(k\\)' without 'k'"),
        ("n, u(n)\n1,2,0\n2,2,1\n", "'0' for u\\(n\\); an uncertainty is above zero"),
    ],
)
def test_columns_that_lack_their_partner(text: str, found: str) -> None:
    with pytest.raises(Refusal, match=found):
        read_table(f"{MINUS}frequency [GHz], {text}")


@pytest.mark.parametrize(
    ("header", "found", "allowed"),
    [
        (
            "materials.m.permittivity.infinity, frequency [GHz], permittivity_real, permittivity_imag",
            "line 2: 'materials.m.permittivity.infinity' before the axis 'frequency'",
            "a sweep holds one for each value",
        ),
        (
            "frequency [GHz], permittivity_real axis 1, permittivity_real axis 2, permittivity_real axis 3",
            "line 2: 'permittivity_real axis 1' is along one axis",
            "call it 'permittivity_real'",
        ),
    ],
)
def test_many_spectra_in_one_file_are_refused_as_such(header: str, found: str, allowed: str) -> None:
    with pytest.raises(Refusal) as caught:
        read_table(MINUS + header + "\n1, 1, 4, 0\n1, 2, 4, 0\n")
    assert found in caught.value.found and allowed in caught.value.allowed

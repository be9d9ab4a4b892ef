"""Measured tables: a spectrum in SI, and its interpolation."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.dispersion.table_text import AXES, DIMENSIONS, Content, check_order, doubted, parse
from mixsim.dispersion.terms.conduction import conduction
from mixsim.errors import Refusal
from mixsim.units import from_unit, kind_of_axis, show, spectral_from

_QUANTITY = {"n": "index", "k": "extinction"}  # columns that a quantity calls otherwise
_SLACK = 1e-12  # the end of a band, written in nm or eV, comes back from rad/s with its last digits changed


@dataclass(frozen=True, eq=False)
class Table:
    """A measured spectrum, in SI and in the convention exp(−iωt).

    Attributes
    ----------
    omega
        Angular frequency, ascending [rad/s].
    permittivity
        Complex relative permittivity [-].
    unit
        Unit of the axis as written.
    columns
        Names of the other columns as written.
    convention
        Time dependence as the file states it, `exp(-iwt)` or `exp(+iwt)`.
    source
        Name of the file, or "text".
    permeability
        Complex relative permeability [-], or None where the table holds none.
    """

    omega: NDArray[np.float64]
    permittivity: NDArray[np.complex128]
    unit: str
    columns: tuple[str, ...]
    convention: str
    source: str
    permeability: NDArray[np.complex128] | None = None

    @property
    def range_written(self) -> str:
        """Range covered, in the unit of the axis as written, smaller number first."""
        ends = [float(self.omega[0]), float(self.omega[-1])]
        if kind_of_axis(self.unit) == AXES["wavelength"]:
            ends.reverse()
        return " to ".join(show(end, "spectral", self.unit) for end in ends)


def read_table(text_or_path: str | Path) -> Table:
    """Read a measured spectrum.

    Parameters
    ----------
    text_or_path
        A `Path` of a CSV file in the layout of `table_text`, or the content of one as `str`.

    Returns
    -------
    table
        Its content in SI and in the convention exp(−iωt).

    Raises
    ------
    Refusal
        Naming the line, counted from 1, what it holds and what would be right.
    OSError
        Where the file cannot be opened.

    Examples
    --------
    >>> table = read_table("# convention: exp(-iwt)\\nfrequency [GHz], n\\n1, 2.0\\n2, 1.5\\n")
    >>> table.range_written, table.permittivity.real.tolist()
    ('1 GHz to 2 GHz', [4.0, 2.25])
    """
    held = parse(text_or_path)
    unit, columns, values = held.unit, held.columns, held.values
    with np.errstate(over="ignore", divide="ignore", invalid="ignore"):
        omega = spectral_from(values[:, 0], unit)
        columns_in_si = _in_si(held)
        permeability = _permeability(columns_in_si, held.sign)
        permittivity = _permittivity(omega, columns_in_si, held.sign, permeability)
    whole = permittivity if permeability is None else permittivity + permeability
    for (number, cells), w, value in zip(held.rows, omega.tolist(), whole.tolist(), strict=True):
        if not (0 < w < np.inf and np.isfinite(value)):
            raise Refusal(f"line {number}: {', '.join(cells)}", "too large or too small to be a permittivity")
    check_order(omega, held.rows)
    rising = slice(None, None, 1 if omega[0] < omega[-1] else -1)
    omega, permittivity = _frozen(omega[rising]), _frozen(permittivity[rising])
    permeability = None if permeability is None else _frozen(permeability[rising])
    convention = "exp(-iwt)" if held.sign > 0 else "exp(+iwt)"
    source = text_or_path.name if isinstance(text_or_path, Path) else "text"
    return Table(omega, permittivity, unit, columns, convention, source, permeability)


def _frozen(values: NDArray[Any]) -> NDArray[Any]:
    """An array of its own that nobody can change."""
    own = values.copy()
    own.setflags(write=False)
    return own


def interpolate(omega: ArrayLike, *, table: Table) -> NDArray[Any]:
    """Permittivity of a measured spectrum, monotone between its points.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    table
        The spectrum, as `read_table` gives it.

    Returns
    -------
    permittivity
        Complex relative permittivity [-].

    Raises
    ------
    Refusal
        Outside the range of the table, which is never extrapolated.

    Notes
    -----
    Piecewise cubic Hermite interpolation in ω of real and imaginary part each. Between two rows the value
    stays between theirs, so a passive table stays passive.

    Valid for: spectra sampled more finely than their narrowest band.

    References
    ----------
    F. N. Fritsch, R. E. Carlson, SIAM J. Numer. Anal. 17, 238 (1980); slopes of F. N. Fritsch, J. Butland,
    SIAM J. Sci. Stat. Comput. 5, 300 (1984).

    Examples
    --------
    >>> table = read_table("# convention: exp(-iwt)\\nfrequency [GHz], n\\n1, 2.0\\n2, 1.5\\n")
    >>> print(f"{interpolate(1.5 * 2e9 * 3.141592653589793, table=table):.3f}")
    3.125+0.000j
    """
    return _between(omega, table, table.permittivity)


def interpolate_permeability(omega: ArrayLike, *, table: Table) -> NDArray[Any]:
    """Permeability of a measured spectrum, as `interpolate`; 1 where it holds none.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    table
        The spectrum, as `read_table` gives it.

    Returns
    -------
    permeability
        Complex relative permeability [-].
    """
    none = np.ones_like(table.permittivity)
    return _between(omega, table, none if table.permeability is None else table.permeability)


def _between(omega: ArrayLike, table: Table, column: NDArray[np.complex128]) -> NDArray[Any]:
    """One column between its rows."""
    from scipy.interpolate import PchipInterpolator

    w = np.asarray(omega, dtype=float)
    low, high = float(table.omega[0]), float(table.omega[-1])
    outside = w[(w < low * (1 - _SLACK)) | (w > high * (1 + _SLACK))]
    if outside.size:
        asked = show(float(outside[0]), "spectral", table.unit)
        raise Refusal(f"{asked} lies outside the table {table.source}", f"it covers {table.range_written}")
    inside = np.clip(w, low, high)
    rows = np.stack([column.real, column.imag], axis=-1)
    with np.errstate(over="ignore"):  # a step so small that its slope is as good as zero
        value = PchipInterpolator(table.omega, rows)(inside)
    left = np.clip(np.searchsorted(table.omega, inside, side="right") - 1, 0, len(rows) - 2)
    # Rounding of the cubic can leave the rows' interval by an ulp, and a loss of zero would turn negative.
    value = np.clip(value, np.minimum(rows[left], rows[left + 1]), np.maximum(rows[left], rows[left + 1]))
    return _complex(value[..., 0], value[..., 1])[()]


@dataclass(frozen=True, eq=False)
class Columns:
    """The columns of a measured spectrum as they were read, in SI and in the convention exp(−iωt).

    Attributes
    ----------
    omega
        Angular frequency, ascending [rad/s].
    values
        What was read, by the name of its quantity.
    stds
        Standard uncertainty of those that state it.
    """

    omega: NDArray[np.float64]
    values: dict[str, NDArray[np.float64]]
    stds: dict[str, NDArray[np.float64]]


def read_columns(text_or_path: str | Path) -> Columns:
    """Read a measured spectrum as what was measured, with its uncertainty, rather than as a permittivity.

    Parameters
    ----------
    text_or_path
        As of `read_table`.

    Returns
    -------
    columns
        Its columns in SI and in the convention exp(−iωt).

    Raises
    ------
    Refusal, OSError
        As `read_table`.

    Examples
    --------
    >>> text = "# convention: exp(+iwt)\\nfrequency [GHz], n, u(n), k\\n1, 2, 0.01, -0.1\\n2, 1.5, 0.01, 0\\n"
    >>> columns = read_columns(text)
    >>> columns.values["extinction"].tolist(), columns.stds["index"].tolist()
    ([0.1, 0.0], [0.01, 0.01])
    """
    held = parse(text_or_path)
    omega = spectral_from(held.values[:, 0], held.unit)
    check_order(omega, held.rows)
    order = np.argsort(omega)
    values, stds = {}, {}
    for name, numbers in _in_si(held).items():
        of = doubted(name)
        quantity = _QUANTITY.get(of or name, of or name)
        if of is not None:
            stds[quantity] = numbers[order]
        else:
            turned = held.sign if name == "k" or name.endswith("_imag") else 1
            values[quantity] = turned * numbers[order] + 0.0  # never -0.0
    return Columns(omega[order], values, stds)


def _in_si(held: Content) -> dict[str, NDArray[np.float64]]:
    """Columns beside the axis by their names."""
    found = {}
    for name, unit, numbers in zip(held.columns, held.units, held.values[:, 1:].T, strict=True):
        dimension = DIMENSIONS.get(doubted(name) or name)
        found[name] = numbers if dimension is None else from_unit(numbers, unit, dimension)
    return found


def _permeability(columns: dict[str, NDArray[np.float64]], sign: int) -> NDArray[np.complex128] | None:
    if "permeability_real" not in columns:
        return None
    real = columns["permeability_real"]
    if "magnetic_loss_tangent" in columns:
        return _complex(real, real * columns["magnetic_loss_tangent"])
    return _complex(real, sign * columns["permeability_imag"])


def _permittivity(
    omega: NDArray[np.float64],
    columns: dict[str, NDArray[np.float64]],
    sign: int,
    permeability: NDArray[np.complex128] | None,
) -> NDArray[np.complex128]:
    """From whichever columns there are; n + ik beside a permeability is √ε·√μ."""
    if "n" in columns:
        n, k = columns["n"], sign * columns.get("k", np.zeros_like(columns["n"]))
        square = _complex(n * n - k * k, 2.0 * n * k)
        return square if permeability is None else square / permeability
    real = columns["permittivity_real"]
    if "loss_tangent" in columns:
        return _complex(real, real * columns["loss_tangent"])
    if "conductivity" in columns:
        return _complex(real, conduction(omega, conductivity=columns["conductivity"]).imag)
    return _complex(real, sign * columns["permittivity_imag"])


def _complex(real: NDArray[np.float64], imaginary: NDArray[np.float64]) -> NDArray[np.complex128]:
    out = np.empty(real.shape, dtype=np.complex128)
    out.real = real
    out.imag = imaginary + 0.0  # never -0.0: the root of a loss-free metal would be the growing wave
    return out

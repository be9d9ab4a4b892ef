"""The spectrum outside a measured band that makes the data inside obey Kramers–Kronig, if there is one."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.dispersion.kramers_kronig import kernel, kinks, kramers_kronig
from mixsim.errors import Refusal
from mixsim.units.constants import VACUUM_PERMITTIVITY

Floats = NDArray[np.float64]

COMPARED = 240  # frequencies at which ε′ is compared; more of them cost time and tell nothing new
_DECADES = (
    4.0  # covered by nodes on either side: what lies beyond looks like a level, or like 1/ω², from here
)
_NODES = 44  # on either side
_NEAREST = 0.02  # first step beyond an end of the band, as a logarithm
_PIN = 300.0  # weight of the ends of a band that the spectrum is to go through
_SMOOTHNESSES = (1.0, 0.1, 0.01, 0.001, 0.0001)
_NO_WORSE, _ROOM = (
    1.2,
    1e-4,
)  # misfit that a smoother spectrum may have: times the least, and more, of 1 + |ε|
_MEDIAN_OF_NORMAL = 0.6745  # of its size, in standard deviations


@dataclass(frozen=True, eq=False)
class Completion:
    """A spectrum completed outside the band where it is known: causal everywhere, and passive.

    Far from the band it is one of many: `level` and `static` depend on how the loss was shared out there.

    Attributes
    ----------
    nodes
        Angular frequencies, ascending, from far below the band to far above [rad/s].
    loss
        Imaginary part at the nodes without that of conduction; linear between them [-].
    level
        Level above all resonances [-].
    conductivity
        Of the conduction iσ/(ε₀ω) [S/m]; 0 for a permeability.
    band
        Ends of the band with data [rad/s].
    compared
        Angular frequencies in the band at which data and spectrum are compared [rad/s].
    given
        The data there, as measured [-].
    residual
        Data less spectrum there, ε′ in the real part; ε″ as far as it is a gain in the imaginary part [-].
    doubt
        What noise and coarse rows let expect of the real residual, one standard deviation [-].
    """

    nodes: Floats
    loss: Floats
    level: float
    conductivity: float
    band: tuple[float, float]
    compared: Floats
    given: NDArray[np.complex128]
    residual: NDArray[np.complex128]
    doubt: Floats

    def __call__(self, omega: ArrayLike) -> NDArray[Any]:
        """Complex permittivity (or permeability) [-] at any angular frequency above zero [rad/s]."""
        w = np.asarray(omega, dtype=float)
        out = np.empty(w.shape, dtype=complex)
        out.real = self.level + kramers_kronig(w, nodes=self.nodes, loss=self.loss)
        places = np.concatenate([[0.0], self.nodes, [self.nodes[-1] ** 2 / self.nodes[-2]]])
        out.imag = np.interp(w, places, np.concatenate([[0.0], self.loss, [0.0]]))
        with np.errstate(divide="ignore"):
            out.imag += self.conductivity / (VACUUM_PERMITTIVITY * w) if self.conductivity else 0.0
        return out[()]

    @property
    def static(self) -> float:
        """Real level at ω → 0, beside conduction if there is any [-]; a band far above says little of it."""
        return float(self.level + kramers_kronig(0.0, nodes=self.nodes, loss=self.loss))

    @property
    def misfit(self) -> float:
        """Root mean square of the residual [-], relative to 1 + |ε|."""
        return _rms(np.abs(self.residual) / (1.0 + np.abs(self.given)))

    @property
    def expected(self) -> float:
        """Root mean square [-] that the doubt lets expect of the misfit, relative to 1 + |ε|."""
        return _rms(self.doubt / (1.0 + np.abs(self.given)))


def complete(
    omega: ArrayLike,
    values: ArrayLike,
    *,
    minimum: float = 1.0,
    conducts: bool = True,
    through_ends: bool = False,
    smoothness: float | None = None,
) -> Completion:
    """Complete a spectrum known on a finite band.

    Parameters
    ----------
    omega
        Angular frequencies, ascending, at least three [rad/s].
    values
        Complex permittivity or permeability there, loss positive [-].
    minimum
        Least level above all resonances [-].
    conducts
        Whether dc conduction may be part of it; not for a permeability.
    through_ends
        Whether the spectrum is to go through the values at both ends, so that it may be joined there.
    smoothness
        Weight of the curvature of the loss outside the band against the residual inside [-]; or None, for the
        greatest that fits the data about as well as a very small one.

    Returns
    -------
    completion
        Spectrum, residual inside the band, and what noise and coarse rows let expect of it.

    Raises
    ------
    Refusal
        Where there are fewer than three points, or they do not ascend, or a value is not finite.

    Notes
    -----
    Inside the band the loss is that of the data, linear between rows, a gain taken as zero. Outside it is
    linear between nodes that stand ever farther apart over four decades either way. Unknown are the
    non-negative losses there, the level and the conductivity; they follow from non-negative linear least
    squares of ε′ at up to 240 rows, evenly spread over the rows and over log ω, relative to 1 + |ε|. Every
    row of the table takes part in the integral; its kernel is held in blocks, so that memory does not grow
    with their product.
    The conductivity is at most what leaves the loss in the band without it non-negative.

    Valid for: rows finer than the bands in them. Far from the band the spectrum is one of many.

    References
    ----------
    C. L. Lawson, R. J. Hanson, Solving Least Squares Problems, 1974, chapter 23 (non-negative least squares).

    Examples
    --------
    >>> import numpy as np
    >>> omega = np.geomspace(0.2, 5.0, 60)
    >>> found = complete(omega, 2.0 + 3.0 / (1.0 - 1j * omega))
    >>> bool(found.misfit < 1e-3), f"{found(1.0):.2f}"
    (True, '3.50+1.50j')
    """
    w, data = _checked(omega, values)
    inside = np.maximum(data.imag, 0.0)
    down, up = w[0] * np.exp(-_ladder()[::-1]), w[-1] * np.exp(_ladder())
    nodes = np.concatenate([down, w, up])
    at = _spread(w)
    points, given = w[at], data[at]
    weight = 1.0 / ((1.0 + np.abs(given)) * np.sqrt(at.size))
    if through_ends:
        weight[[0, -1]] *= _PIN

    def of_band(values: Floats) -> Floats:
        whole = np.concatenate([np.zeros(down.size), values, np.zeros(up.size)])
        return np.asarray(kramers_kronig(points, nodes=nodes, loss=whole))

    base = of_band(inside)
    outside = _outside(points, nodes, down.size, up.size)
    pole = 1.0 / (VACUUM_PERMITTIVITY * w)
    most = float(np.min(inside / pole)) if conducts else 0.0
    # the conduction pole has no real part; what the band holds of it leaves the integral
    charge = -of_band(pole / pole[0]) if most > 0.0 else np.zeros(points.size)
    columns = np.column_stack([np.ones(points.size), charge, outside])
    aim = given.real - base - minimum
    ends = np.array([[w[0] * np.exp(_NEAREST), w[0]], [w[-1] * np.exp(-_NEAREST), w[-1]]])
    known = np.interp(ends, w, inside), w[0] / ends
    rows = columns * weight[:, np.newaxis], aim * weight
    least = None
    for wanted in (_SMOOTHNESSES[-1], *_SMOOTHNESSES) if smoothness is None else (smoothness,):
        found = _bounded(*rows, known, down.size, wanted, most * pole[0])
        misfit = float(np.linalg.norm(rows[0] @ found - rows[1]))
        if least is not None and misfit <= _NO_WORSE * least + _ROOM:
            break
        least = misfit if least is None else least
    excess, sigma = float(found[0]), float(found[1] / pole[0])
    loss = np.concatenate([found[2 : 2 + down.size], inside - sigma * pole, found[2 + down.size :]])
    residual = np.empty(points.size, dtype=complex)
    residual.real = aim - columns @ found
    residual.imag = np.minimum(given.imag, 0.0)
    size = 1.0 + np.abs(given)
    half = np.interp(w, w[_halved(w.size)], inside[_halved(w.size)])
    doubt = size * _doubt(residual.real / size, of_band(inside - half) / size)
    band = float(w[0]), float(w[-1])
    return Completion(
        nodes, np.maximum(loss, 0.0), minimum + excess, sigma, band, points, given, residual, doubt
    )


def _checked(omega: ArrayLike, values: ArrayLike) -> tuple[Floats, NDArray[np.complex128]]:
    w, data = np.asarray(omega, dtype=float), np.asarray(values, dtype=complex)
    if w.ndim != 1 or w.size < 3 or data.shape != w.shape:
        raise Refusal(f"{w.size} frequencies and values of shape {data.shape}", "at least three of each")
    if not (w[0] > 0.0 and np.all(np.diff(w) > 0.0) and np.isfinite(w[-1])):
        raise Refusal("frequencies that do not ascend from above zero", "each above the one before")
    if not np.isfinite(data).all():
        raise Refusal("values that are not finite", "finite values at every frequency")
    return w, data


def _ladder() -> Floats:
    """Logarithmic distances of the nodes from an end of the band, ever farther apart."""
    reach, k = _DECADES * np.log(10.0), np.arange(1, _NODES + 1)
    low, high = 1.0, 2.0
    for _ in range(60):  # ratio of the steps for which they add up to the reach
        ratio = 0.5 * (low + high)
        low, high = (ratio, high) if _NEAREST * np.sum(ratio ** (k - 1.0)) < reach else (low, ratio)
    return np.asarray(_NEAREST * np.cumsum(low ** (k - 1.0)))


def _spread(w: Floats) -> NDArray[np.int64]:
    """Indices of the rows to compare: half evenly over the rows, half over log ω, the ends among them."""
    if w.size <= COMPARED:
        return np.arange(w.size)
    even = np.round(np.linspace(0, w.size - 1, COMPARED // 2)).astype(int)
    log = np.searchsorted(w, np.geomspace(w[0], w[-1], COMPARED // 2)[1:-1])
    return np.unique(np.concatenate([even, np.clip(log, 0, w.size - 1)]))


def _halved(count: int) -> NDArray[np.int64]:
    """Indices of every second row, and of the last."""
    return np.unique(np.append(np.arange(0, count, 2), count - 1))


def _outside(points: Floats, nodes: Floats, below: int, above: int) -> Floats:
    """Real part at the points for a unit loss at each node outside the band: one column for each."""
    parts = []
    for near, own in ((nodes[: below + 1], slice(0, below)), (nodes[-above - 1 :], slice(1, above + 1))):
        places, held = kinks(near, np.eye(near.size)[:, own])
        parts.append(kernel(points, places) @ held)
    return np.concatenate(parts, axis=1)


def _bounded(
    scaled: Floats,
    aim: Floats,
    known: tuple[Floats, Floats],
    below: int,
    smoothness: float,
    most: float,
) -> Floats:
    """Non-negative least squares, the second unknown at most `most`."""
    size = np.linalg.norm(scaled, axis=0)
    size[size == 0.0] = 1.0
    curved, joined = _curvature(size, known, below)
    matrix = np.concatenate([scaled / size, smoothness * curved])
    wanted = np.concatenate([aim, smoothness * joined])
    found = _non_negative(matrix, wanted) / size
    if found[1] > most:  # convex: the least square then lies at the bound
        wanted = wanted - matrix[:, 1] * (most * size[1])
        rest = np.delete(matrix, 1, axis=1)
        found = np.insert(_non_negative(rest, wanted), 1, most * size[1]) / size
    return np.asarray(found)


def _curvature(size: Floats, known: tuple[Floats, Floats], below: int) -> tuple[Floats, Floats]:
    """Rows that ask for a smooth loss outside the band, which goes on as that inside without conduction does.

    Each takes a loss from the chord of its neighbours in log ω; the losses are weighed by how far a
    logarithmic unit of each would move ε′ in the band, or else those next to it would drown the rest.
    """
    steps = _ladder()
    widths = np.gradient(np.concatenate([[0.0], steps]))[1:]
    places = np.concatenate([[-steps[0], 0.0], steps])
    lower, upper = np.arange(2, 2 + below)[::-1], np.arange(2 + below, size.size)
    rows, aims = np.zeros((2, steps.size, size.size)), np.zeros((2, steps.size))
    for side, (chain, held) in enumerate(zip((lower, upper), known[0], strict=True)):
        moved = size[chain] / widths
        for i in range(steps.size):  # of a short chain, not of frequencies
            left, here, right = places[i : i + 3]
            share = (here - left) / (right - left)
            for node, part in ((i, share - 1.0), (i + 1, 1.0), (i + 2, -share)):
                if node < 2:
                    aims[side, i] -= moved[max(i - 1, 0)] * part * held[node]
                    rows[side, i, 1] -= moved[max(i - 1, 0)] * part * known[1][side, node] / size[1]
                else:
                    rows[side, i, chain[node - 2]] = moved[max(i - 1, 0)] * part / size[chain[node - 2]]
    return np.concatenate(rows), np.concatenate(aims)


def _non_negative(matrix: Floats, wanted: Floats) -> Floats:
    from scipy.optimize import nnls

    found, _ = nnls(matrix, wanted, maxiter=30 * matrix.shape[1])
    return np.asarray(found)


def _doubt(misfit: Floats, between: Floats) -> Floats:
    """Standard deviation to expect of the residual, both relative to 1 + |ε|.

    Scatter shows as the difference of a residual from the mean of its neighbours. What the integral loses
    between rows, and the noise of ε″ in it, show where every second row is left out.
    """
    bends = misfit[1:-1] - 0.5 * (misfit[:-2] + misfit[2:])
    scatter = np.median(np.abs(bends)) / (_MEDIAN_OF_NORMAL * np.sqrt(1.5)) if bends.size else 0.0
    window = np.ones(min(9, between.size))
    count = np.convolve(np.ones(between.size), window, mode="same")
    local = np.convolve(np.square(between), window, mode="same") / count
    return np.asarray(np.sqrt(scatter**2 + local))


def _rms(values: Floats) -> float:
    return float(np.sqrt(np.mean(np.square(values))))

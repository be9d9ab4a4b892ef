"""Absorption bands that are no Lorentzians: Gaussian, Gaussian-broadened, and with a gap."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from mixsim.dispersion import descriptions
from mixsim.dispersion.registry import Route, Term
from mixsim.dispersion.terms.parts import Array, floats
from mixsim.parameter import by_name, not_negative, positive

_SHARP = 2.0 * np.sqrt(np.log(2.0))  # full width at half maximum of exp(−x²)


def gaussian(omega: ArrayLike, *, amplitude: ArrayLike, resonance: ArrayLike, width: ArrayLike) -> Array:
    """Gaussian absorption band with its dispersion: wings that end.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    amplitude
        Height A of ε″ at the band [-].
    resonance
        Centre ω₀ [rad/s].
    width
        Full width at half maximum [rad/s].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    iA [w(x₋) − w(x₊)], x± = (ω ± ω₀)/s, s = width/(2√ln 2), w the Faddeeva function: Gaussians of ε″ at
    ±ω₀, and their Kramers–Kronig transform in closed form.

    Valid for: inhomogeneously broadened bands, as of ions in glass.

    References
    ----------
    D. De Sousa Meneses, M. Malki, P. Echegut, J. Non-Cryst. Solids 352, 769 (2006).

    Examples
    --------
    >>> print(f"{gaussian(2.0, amplitude=1.0, resonance=2.0, width=0.1).imag:.6f}")
    1.000000
    """
    from scipy.special import dawsn

    w, height, w0, full = floats(omega, amplitude, resonance, width)
    scale = _SHARP / full
    near, far = (w - w0) * scale, (w + w0) * scale
    shape = np.broadcast_shapes(near.shape, height.shape)
    contribution = np.empty(shape, dtype=complex)
    # w(x) = exp(−x²) + (2i/√π) D(x) on the real axis: Dawson's integral is the cheaper half
    np.multiply(2.0 / np.sqrt(np.pi) * height, dawsn(far) - dawsn(near), out=contribution.real)
    np.multiply(height, np.exp(-near * near) - np.exp(-far * far), out=contribution.imag)
    return contribution[()]


def gaussian_low(*, amplitude: ArrayLike, resonance: ArrayLike, width: ArrayLike) -> tuple[Array, Array]:
    """Behaviour of `gaussian` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    amplitude
        As in `gaussian` [-].
    resonance, width
        As in `gaussian` [rad/s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and (4A/√π) D(ω₀/s) [-], D Dawson's integral.

    Examples
    --------
    >>> print(f"{gaussian_low(amplitude=1.0, resonance=2.0, width=0.1)[1]:.6f}")
    0.033898
    """
    from scipy.special import dawsn

    height, w0, full = floats(amplitude, resonance, width)
    plateau = 4.0 / np.sqrt(np.pi) * height * dawsn(w0 * _SHARP / full)
    return 0.0 * plateau, plateau


def brendel_bormann(
    omega: ArrayLike, *, plasma: ArrayLike, resonance: ArrayLike, damping: ArrayLike, width: ArrayLike
) -> Array:
    """Lorentz oscillators whose resonances are spread as a Gaussian, after Brendel and Bormann.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    plasma
        Plasma frequency ωp, strength included [rad/s].
    resonance
        Mean resonance ω₀ [rad/s].
    damping
        Full width Γ of each oscillator [rad/s].
    width
        Standard deviation σ of the resonances [rad/s].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    (i√π ωp²)/(2√2 a σ) [w((a − ω₀)/(√2 σ)) + w((a + ω₀)/(√2 σ))] with a = √(ω² + iΓω) in the upper half-plane
    and w the Faddeeva function.

    Valid for: frequencies well above Γ and not far below ω₀ − 3σ: as published it rises without end as ω → 0.

    References
    ----------
    R. Brendel, D. Bormann, J. Appl. Phys. 71, 1 (1992); A. D. Rakić et al., Appl. Opt. 37, 5271 (1998).

    Examples
    --------
    >>> value = brendel_bormann(2.0, plasma=1.0, resonance=2.0, damping=0.1, width=1e-4)
    >>> print(f"{value:.3f}")  # hardly spread: the Lorentz line, i ωp²/(Γω₀)
    0.000+5.000j
    """
    from scipy.special import wofz

    w, wp, w0, rate, sigma = floats(omega, plasma, resonance, damping, width)
    with np.errstate(divide="ignore", invalid="ignore"):
        a = np.sqrt(w * w + 1j * rate * w)
        scale = 1.0 / (np.sqrt(2.0) * sigma)
        pair = wofz((a - w0) * scale) + wofz((a + w0) * scale)
        contribution = np.asarray(1j * np.sqrt(np.pi) * 0.5 * scale * (wp * wp) * pair / a)
        # far from the band the two functions all but cancel: what is left below zero is rounding
        np.maximum(contribution.imag, 0.0, out=contribution.imag)
    return contribution[()]


def brendel_bormann_low(
    *, plasma: ArrayLike, resonance: ArrayLike, damping: ArrayLike, width: ArrayLike
) -> tuple[Array, Array]:
    """Behaviour of `brendel_bormann` as ω → 0: as published it has no static limit.

    Parameters
    ----------
    plasma, resonance, damping, width
        As in `brendel_bormann` [rad/s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and NaN [-] unless the plasma frequency is 0.

    Examples
    --------
    >>> rate, plateau = brendel_bormann_low(plasma=1.0, resonance=2.0, damping=0.1, width=0.2)
    >>> float(rate), float(plateau)
    (0.0, nan)
    """
    wp, w0, gamma, sigma = floats(plasma, resonance, damping, width)
    nothing = 0.0 * (wp + w0 + gamma + sigma)
    return nothing, np.where(wp == 0.0, 0.0, np.nan) + nothing


def tauc_lorentz(
    omega: ArrayLike, *, amplitude: ArrayLike, resonance: ArrayLike, damping: ArrayLike, gap: ArrayLike
) -> Array:
    """Absorption above a gap, after Jellison and Modine.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    amplitude
        Amplitude A, an energy in the published form [rad/s].
    resonance
        Peak frequency ω₀ [rad/s].
    damping
        Broadening C [rad/s].
    gap
        Gap ω_g, below which nothing is absorbed [rad/s].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    ε″ = A ω₀ C (ω − ω_g)² / {[(ω² − ω₀²)² + C²ω²] ω} above the gap. Its Kramers–Kronig integral is that of a
    rational function, so that ε is a sum over the poles r of the integrand, four of the oscillator and ±ω::

        ε = −Σ c_r ln(ω_g − r)

    which needs no case for an overdamped band, where the published real form has the root of a negative.

    Valid for: amorphous solids near their gap; infinity is to hold what lies above.

    References
    ----------
    G. E. Jellison, F. A. Modine, Appl. Phys. Lett. 69, 371 (1996); erratum 69, 2137 (1996).

    Examples
    --------
    >>> value = tauc_lorentz(4.0, amplitude=100.0, resonance=4.0, damping=2.0, gap=1.5)
    >>> print(f"{value.imag:.6f}")  # A (ω − ω_g)²/(C ω²)
    19.531250
    """
    w, size, w0, width, edge = floats(omega, amplitude, resonance, damping, gap)
    with np.errstate(divide="ignore", invalid="ignore"):
        x, c, g = w / w0, width / w0, edge / w0
        k = 2.0 / np.pi * (size / w0) * c
        square = x * x
        total = np.zeros(np.broadcast_shapes(x.shape, k.shape, g.shape))
        for root, share in _oscillator(c, g, k):
            total += 2.0 * np.real(share / (root * root - square))
        below = np.maximum(np.abs(g - x), np.finfo(float).tiny)
        weight = k / (2.0 * ((square - 1.0) ** 2 + c * c * square))
        real = total + weight * _edges(x, g, below)
        imag = np.where(x > g, np.pi * weight * (x - g) ** 2 / x, 0.0)
    contribution = np.empty(real.shape, dtype=complex)
    contribution.real, contribution.imag = real, imag
    return contribution[()]


def tauc_lorentz_low(
    *, amplitude: ArrayLike, resonance: ArrayLike, damping: ArrayLike, gap: ArrayLike
) -> tuple[Array, Array]:
    """Behaviour of `tauc_lorentz` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    amplitude, resonance, damping, gap
        As in `tauc_lorentz` [rad/s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and the Kramers–Kronig integral at ω = 0 [-].

    Examples
    --------
    >>> rate, plateau = tauc_lorentz_low(amplitude=100.0, resonance=4.0, damping=2.0, gap=1.5)
    >>> print(f"{plateau:.4f}")
    7.3152
    """
    size, w0, width, edge = floats(amplitude, resonance, damping, gap)
    with np.errstate(divide="ignore", invalid="ignore"):
        c, g = width / w0, edge / w0
        k = 2.0 / np.pi * (size / w0) * c
        total = np.zeros(np.broadcast_shapes(k.shape, g.shape))
        for root, share in _oscillator(c, g, k):
            total += 2.0 * np.real(share / (root * root))
        plateau = total + k * g * (2.0 * np.log(np.where(g > 0.0, g, 1.0)) + 1.0)
    return 0.0 * plateau, plateau


def _oscillator(c: Array, g: Array, k: Array) -> list[tuple[Array, Array]]:
    """Poles of the oscillator in the upper half-plane, each with −c_r ln(ω_g − r) but for 1/(r² − ω²)."""
    # at C = 2ω₀ two poles meet and their shares diverge against each other: step aside
    c = np.where(np.abs(c - 2.0) < 1e-7, 2.0 + 1e-7, c)
    larger = np.sqrt(np.asarray(1.0 - 0.25 * c * c, dtype=complex)) + 0.5j * c
    found = []
    for root in (larger, -1.0 / larger):  # their product is −1, also where one of them is small
        slope = 4.0 * root * (root * root - 1.0) + 2.0 * c * c * root
        found.append((root, -k * (root - g) ** 2 / slope * np.log(g - root)))
    return found


def _edges(x: Array, g: Array, below: Array) -> Array:
    """[(ω_g + ω)² ln(ω_g + ω) − (ω_g − ω)² ln|ω_g − ω|]/ω, whose two terms cancel far below the gap."""
    small = x < 1e-3 * g
    edge = np.where(g > 0.0, g, 1.0)
    series = 2.0 * g * (2.0 * np.log(edge) + 1.0) + (2.0 / 3.0) * x * x / edge
    direct = ((g + x) ** 2 * np.log(g + x) - (g - x) ** 2 * np.log(below)) / x
    return np.asarray(np.where(small, series, direct))


_PLASMA = (
    Route("plasma", descriptions.plasma_scaled, also=("strength",)),
    Route("number_density", descriptions.plasma_from_number_density, also=("strength",)),
)

GAUSSIAN = Term(
    name="gaussian",
    function=gaussian,
    low=gaussian_low,
    canonical={
        "amplitude": (
            Route("amplitude"),
            Route(
                "absorption_peak",
                descriptions.amplitude_from_absorption_peak,
                also=("resonance", "background_index"),
            ),
        ),
        "resonance": (Route("resonance"),),
        "width": (Route("width"),),
    },
    parameters=by_name(
        not_negative("amplitude", "number", "height of the imaginary part"),
        not_negative("absorption_peak", "absorption", "peak absorption of a weak band, base e"),
        positive("background_index", "number", "index of the medium at the band, beside absorption_peak"),
        positive("resonance", "spectral", "centre of the band"),
        positive("width", "rate", "full width at half maximum"),
    ),
    summary="absorption band whose wings end, with its dispersion",
    equation="iA [w(x₋) − w(x₊)], x± = (ω ± ω₀)/s",
    source="D. De Sousa Meneses et al., J. Non-Cryst. Solids 352, 769 (2006)",
)
BRENDEL_BORMANN = Term(
    name="brendel-bormann",
    function=brendel_bormann,
    low=brendel_bormann_low,
    canonical={
        "plasma": _PLASMA,
        "resonance": (Route("resonance"),),
        "damping": (Route("damping"),),
        "width": (Route("width"),),
    },
    parameters=by_name(
        not_negative("plasma", "spectral", "plasma frequency"),
        not_negative(
            "strength", "number", "multiplies plasma²; with number_density, the oscillator strength", 1.0
        ),
        not_negative("number_density", "number density", "oscillators per volume"),
        positive("resonance", "spectral", "mean resonance frequency"),
        not_negative("damping", "rate", "full width of each oscillator"),
        positive("width", "spectral", "standard deviation of the resonances"),
    ),
    summary="Lorentz bands spread as a Gaussian; no static limit as published",
    equation="(i√π ωp²)/(2√2 a σ) [w((a − ω₀)/(√2 σ)) + w((a + ω₀)/(√2 σ))], a² = ω² + iΓω",
    source="R. Brendel, D. Bormann, J. Appl. Phys. 71, 1 (1992)",
    of=("permittivity",),
)
TAUC_LORENTZ = Term(
    name="tauc-lorentz",
    function=tauc_lorentz,
    low=tauc_lorentz_low,
    canonical={name: (Route(name),) for name in ("amplitude", "resonance", "damping", "gap")},
    parameters=by_name(
        not_negative("amplitude", "spectral", "amplitude, an energy in the published form"),
        positive("resonance", "spectral", "peak frequency"),
        positive("damping", "rate", "broadening"),
        not_negative("gap", "spectral", "gap, below which nothing is absorbed"),
    ),
    summary="absorption above a gap, as of amorphous solids",
    equation="ε″ = A ω₀ C (ω − ω_g)² / {[(ω² − ω₀²)² + C²ω²] ω} above ω_g",
    source="G. E. Jellison, F. A. Modine, Appl. Phys. Lett. 69, 371 (1996)",
    of=("permittivity",),
)

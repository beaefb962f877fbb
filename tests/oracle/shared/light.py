"""Planck's law and the CIE 1931 observer."""

import numpy as np
from scipy.constants import c, h, k
from scipy.interpolate import CubicSpline

from .files import columns
from .tungsten import spectral_emissivity

_observer = columns("cie1931_2deg.csv")
NANOMETRES = np.arange(380.0, 780.5, 1.0)
# The published rows are 5 nm apart; a spline between them, integrated at 1 nm.
MATCHING = np.array(
    [CubicSpline(_observer["nanometre"], _observer[name])(NANOMETRES) for name in ("xbar", "ybar", "zbar")]
)


def planck_exitance(kelvin):
    """Spectral exitance of a black body at NANOMETRES, watts per square metre and metre."""
    metre = NANOMETRES * 1e-9
    return 2 * np.pi * h * c**2 / metre**5 / np.expm1(h * c / (metre * k * kelvin))


def tristimulus(kelvin, tungsten=True):
    """X, Y, Z as exitance, watts per square metre."""
    emissivity = spectral_emissivity(NANOMETRES, kelvin) if tungsten else 1.0
    return np.trapezoid(MATCHING * planck_exitance(kelvin) * emissivity, NANOMETRES * 1e-9, axis=1)

"""Tungsten from the reference tables, joined by scipy's monotone cubic."""

import numpy as np
from scipy.interpolate import PchipInterpolator, RegularGridInterpolator

from .files import columns

AMBIENT = 300.0
HOTTEST = 3600.0
SIGMA = 5.670374419e-8
DENSITY = 19250.0
MOLAR_KILOGRAM = 0.18384


def _emissivity():
    """CRC to 3000 K, then the rise of the 1999 table scaled to meet it there, at four digits."""
    table = columns("tungsten_total_emissivity.csv")
    crc = dict(zip(table["kelvin"], table["emissivity_crc60"]))
    other = dict(zip(table["kelvin"], table["emissivity_matsumoto_1999_iter_fit"]))
    kelvins = [kelvin for kelvin in table["kelvin"] if kelvin >= AMBIENT]
    joint = crc[3000.0] / other[3000.0]
    values = [crc[k] if k <= 3000.0 else round(joint * other[k], 4) for k in kelvins]
    return PchipInterpolator(kelvins, values)


_table = columns("tungsten_resistivity.csv")
resistivity = PchipInterpolator(_table["kelvin"], _table["microohm_cm_forsythe_worthing_1925"])
emissivity = _emissivity()
_heat = columns("tungsten_specific_heat.csv")
_molar = PchipInterpolator(
    [k for k in _heat["kelvin"] if k >= AMBIENT],
    [c for k, c in zip(_heat["kelvin"], _heat["joule_per_mole_kelvin_janaf_1998"]) if k >= AMBIENT],
)


def heat_capacity(kelvin):
    """Joule per kilogram and kelvin."""
    return _molar(kelvin) / MOLAR_KILOGRAM


def exitance(kelvin):
    """Radiated power of a square metre, watts."""
    return emissivity(kelvin) * SIGMA * kelvin**4


_spectral = columns("tungsten_spectral_emissivity.csv")
_grid = RegularGridInterpolator(
    (_spectral["nanometre"], [1600.0, 2000.0, 2400.0, 2800.0]),
    np.array([_spectral[f"at_{k}_kelvin"] for k in (1600, 2000, 2400, 2800)]).T,
)


def spectral_emissivity(nanometres, kelvin):
    """Between the measurements linearly; outside their temperatures the nearest one."""
    at = np.full_like(nanometres, np.clip(kelvin, 1600.0, 2800.0))
    return _grid(np.column_stack([nanometres, at]))

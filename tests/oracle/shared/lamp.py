"""One lamp, by the equations of the design."""

import numpy as np
from scipy.optimize import brentq

from . import light
from .tungsten import AMBIENT, DENSITY, HOTTEST, exitance, heat_capacity, resistivity

FILM = 1.7
COIL_SHARE = 0.65
LIGHT_OUT = 0.87


class Lamp:
    def __init__(self, volts, watts, kelvin, gas_share):
        self.volts, self.watts, self.kelvin, self.gas_share = volts, watts, kelvin, gas_share
        self.radiation = (1 - gas_share) * watts / (exitance(kelvin) - exitance(AMBIENT))
        self.film = gas_share * watts / (kelvin**FILM - AMBIENT**FILM)

    def inputs(self):
        return {"volts": self.volts, "watts": self.watts, "rated_kelvin": self.kelvin, "gas_share": self.gas_share}

    def ohms(self, kelvin):
        return self.volts**2 / self.watts * resistivity(kelvin) / resistivity(self.kelvin)

    def heat(self, kelvin):
        """Watts that hold a temperature."""
        radiated = self.radiation * (exitance(kelvin) - exitance(AMBIENT))
        return radiated + self.film * (kelvin**FILM - AMBIENT**FILM)

    def kelvin_at_volts(self, volts):
        return brentq(lambda k: self.heat(k) * self.ohms(k) - volts**2, AMBIENT, HOTTEST, xtol=1e-10, rtol=1e-14)

    def kelvin_at_amps(self, amps):
        return brentq(lambda k: self.heat(k) / self.ohms(k) - amps**2, AMBIENT, HOTTEST, xtol=1e-10, rtol=1e-14)

    def amps(self, volts):
        return volts / self.ohms(self.kelvin_at_volts(volts))

    def lumens(self, kelvin):
        efficacy = 683.0 * light.tristimulus(kelvin)[1] / exitance(kelvin)
        return LIGHT_OUT * efficacy * self.radiation * (exitance(kelvin) - exitance(AMBIENT))

    def wire(self):
        """Diameter and length, metre, and the heat capacity at the rating, joule per kelvin."""

        def surface_left(diameter):
            length = self.volts**2 / self.watts * np.pi * diameter**2 / 4 / (resistivity(self.kelvin) * 1e-8)
            radiated = COIL_SHARE * np.pi * diameter * length * (exitance(self.kelvin) - exitance(AMBIENT))
            return radiated - (1 - self.gas_share) * self.watts

        diameter = brentq(surface_left, 1e-7, 1e-2, xtol=1e-18, rtol=1e-14)
        length = self.volts**2 / self.watts * np.pi * diameter**2 / 4 / (resistivity(self.kelvin) * 1e-8)
        mass = DENSITY * length * np.pi * diameter**2 / 4
        return diameter, length, mass * heat_capacity(self.kelvin)


def kelvin_for_lumens(lumens, watts, gas_share):
    """The temperature at which a lamp of this rating gives its lumens."""

    def excess(kelvin):
        efficacy = 683.0 * light.tristimulus(kelvin)[1] / exitance(kelvin)
        return LIGHT_OUT * efficacy * (1 - gas_share) * watts - lumens

    return brentq(excess, 1500.0, 3400.0, xtol=1e-9)


class Bank:
    """A series chain of parallel groups."""

    def __init__(self, groups):
        self.groups = groups

    def inputs(self):
        return [[lamp.inputs() for lamp in group] for group in self.groups]

    @staticmethod
    def _group_volts(group, amps):
        if len(group) == 1:
            lamp = group[0]
            return amps * lamp.ohms(lamp.kelvin_at_amps(amps))
        most = min(np.sqrt(lamp.heat(HOTTEST) * lamp.ohms(HOTTEST)) for lamp in group)
        excess = lambda volts: sum(lamp.amps(volts) for lamp in group) - amps
        return brentq(excess, 1e-9, most, xtol=1e-13, rtol=1e-14)

    def group_volts(self, amps):
        return [self._group_volts(group, amps) for group in self.groups]

    def volts(self, amps):
        return sum(self.group_volts(amps))

    def most_amps(self, volts):
        """The current with the whole of `volts` across the bank."""
        top = min(
            sum(lamp.amps(most) for lamp in group)
            for group in self.groups
            for most in [0.999 * min(np.sqrt(one.heat(HOTTEST) * one.ohms(HOTTEST)) for one in group)]
        )
        return brentq(lambda amps: self.volts(amps) - volts, 1e-9, top, xtol=1e-14, rtol=1e-14)

    def lamps(self, amps):
        """Volts, amperes, kelvin of every lamp."""
        return [
            [{"volts": volts, "amps": lamp.amps(volts), "kelvin": lamp.kelvin_at_volts(volts)} for lamp in group]
            for group, volts in zip(self.groups, self.group_volts(amps))
        ]


# Typical temperatures and gas shares; the checks pass the same numbers to the core, so they need not be its defaults.
STOCK = {
    25: Lamp(230.0, 25.0, 2430.0, 0.0),
    40: Lamp(230.0, 40.0, 2620.0, 0.20),
    60: Lamp(230.0, 60.0, 2690.0, 0.20),
    100: Lamp(230.0, 100.0, 2740.0, 0.17),
    150: Lamp(230.0, 150.0, 2770.0, 0.145),
    200: Lamp(230.0, 200.0, 2790.0, 0.13),
}

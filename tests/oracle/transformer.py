"""A transformer supply behind a lamp, in the time domain: tests/golden/transformer_time.json.

The core adds the magnetising current in quadrature as if it were a sinusoid, and lets the pulse see a sinusoidal source.
Here nothing is assumed: flux and reservoir are integrated, the magnetising current is a curve of the flux, and the
filament is held at the temperature that its RMS current gives it.
"""

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import brentq, root

from shared.files import write
from shared.lamp import STOCK

HERTZ = 50.0
OMEGA = 2 * np.pi * HERTZ
HALF = 0.5 / HERTZ
LINEAR = 0.6
# The share of the ninth power that makes the RMS current at rated volts the rated one, given the linear share: the
# positive root of the quadratic from the means of sin^2, sin^10 and sin^18.
NINTH = np.polynomial.Polynomial([2 * LINEAR**2 * 0.5 - 1, 4 * LINEAR * 945 / 3840, 2 * 34459425 / 185794560]).roots().max()


class Supply:
    """Referred to the primary."""

    def __init__(self, **numbers):
        self.__dict__.update(numbers)
        self.numbers = numbers

    def magnetising(self, flux):
        share = flux * OMEGA / (np.sqrt(2) * self.rated_volts)
        return np.sqrt(2) * self.magnetising_amps * (LINEAR * share + NINTH * share**9)

    def branches(self, source, ohms, flux, dc):
        """Primary volts and rectifier amperes, from Kirchhoff's laws at one instant."""
        magnetising = self.magnetising(flux)
        idle = (source / ohms - magnetising) / (1 / ohms + 1 / self.core_ohms)
        held = self.diode_volts + dc
        if abs(idle) <= held:
            return idle, 0.0
        sign = np.sign(idle)
        volts = source / ohms - magnetising + sign * held / self.winding_ohms
        volts /= 1 / ohms + 1 / self.core_ohms + 1 / self.winding_ohms
        return volts, (volts - sign * held) / self.winding_ohms

    def periodic(self, supply_volts, ohms, guess):
        """RMS amperes from the source, mean DC volts, watts into the primary, in the state that repeats."""
        crest = np.sqrt(2) * supply_volts

        def slopes(seconds, state):
            source = crest * np.sin(OMEGA * seconds)
            volts, rectified = self.branches(source, ohms, state[0], state[1])
            amps = (source - volts) / ohms
            charge = (abs(rectified) - state[1] / self.draw_ohms) / self.farads
            return [volts, charge, state[1], amps**2, amps * volts, volts**2]

        def half_period(start):
            found = solve_ivp(
                slopes, (0.0, HALF), [*start, 0.0, 0.0, 0.0, 0.0], method="RK45", rtol=1e-8, atol=1e-9, max_step=HALF / 80
            )
            return found.y[:, -1]

        def mismatch(start):
            end = half_period(start)
            # Half a period later the flux is reversed and the reservoir where it was.
            return [(end[0] + start[0]) * OMEGA, end[1] - start[1]]

        for _ in range(6):
            found = root(mismatch, guess, method="hybr", tol=1e-8)
            if found.success:
                break
            # Too far off for Newton's method: let time itself come closer.
            for _ in range(40):
                end = half_period(guess)
                guess = [-end[0], end[1]]
        else:
            raise ArithmeticError(found.message)
        end = half_period(found.x)
        return found.x, np.sqrt(end[3] / HALF), end[2] / HALF, end[4] / HALF, np.sqrt(end[5] / HALF)


def settled(lamp, supply, supply_volts):
    guess = [-np.sqrt(2) * 0.6 * supply_volts / OMEGA, 0.6 * supply_volts]

    def excess(kelvin):
        nonlocal guess
        guess, rms, *_ = supply.periodic(supply_volts, lamp.ohms(kelvin), guess)
        return np.sqrt(lamp.heat(kelvin) / lamp.ohms(kelvin)) - rms

    kelvin = brentq(excess, 310.0, lamp.kelvin * 1.01, xtol=1e-5, rtol=1e-10)
    _, rms, dc, watts, volts = supply.periodic(supply_volts, lamp.ohms(kelvin), guess)
    return {"kelvin": kelvin, "amps": rms, "bank_volts": rms * lamp.ohms(kelvin)} | {
        "dc_volts": dc,
        "load_volts": volts,
        "load_watts": watts,
    }


def set_for(watts, magnetising_share, draw_share):
    """A set for 230 V: windings 6 %, core loss 5 %, and a draw as a share of the rated resistance."""
    rated = 230.0**2 / watts
    return Supply(
        rated_volts=230.0,
        magnetising_amps=magnetising_share * watts / 230.0,
        core_ohms=rated / 0.05,
        winding_ohms=0.06 * rated,
        diode_volts=2.3,
        farads=0.1 / (2 * rated),
        draw_ohms=draw_share * rated,
    )


cases = []
for lamp in (STOCK[25], STOCK[60], STOCK[100], STOCK[200]):
    for supply, note in (
        (set_for(45.0, 0.25, 2.0), "45 W set"),
        (set_for(45.0, 0.25, 0.5), "45 W set, overloaded"),
        (set_for(45.0, 0.25, 15.0), "45 W set, nearly idle"),
        (set_for(45.0, 1.0, 2.0), "45 W set, hungry core"),
        (set_for(120.0, 0.25, 2.0), "120 W set"),
    ):
        found = settled(lamp, supply, 230.0)
        cases.append({"note": note, "lamp": lamp.inputs(), "supply": supply.numbers, "supply_volts": 230.0} | found)
        print(f"{lamp.watts:5.0f} W, {note}: {found['amps']:.4f} A, {found['bank_volts']:.1f} V, {found['dc_volts']:.1f} V DC")
write("transformer_time.json", cases, digits=6)

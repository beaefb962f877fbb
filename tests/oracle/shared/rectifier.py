"""A full-wave rectifier with reservoir behind a resistance: closed form, and integrated through the half period."""

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import brentq


def closed_form(crest, ohms, diode_volts, dc_volts):
    """Mean and RMS current at a held DC voltage, no ripple (O. H. Schade, Proc. IRE 31 (1943) 341)."""
    theta = np.arccos(np.clip((dc_volts + diode_volts) / crest, 0.0, 1.0))
    mean = 2 * crest / (np.pi * ohms) * (np.sin(theta) - theta * np.cos(theta))
    square = crest**2 / (np.pi * ohms**2) * (theta * (1 + 2 * np.cos(theta) ** 2) - 1.5 * np.sin(2 * theta))
    return mean, np.sqrt(max(square, 0.0))


def without_ripple(crest, ohms, diode_volts, drawn):
    """DC volts, and mean and RMS current, at which a draw takes what the pulse brings."""
    excess = lambda dc: closed_form(crest, ohms, diode_volts, dc)[0] - drawn(dc)
    dc_volts = brentq(excess, 0.0, crest - diode_volts, xtol=1e-12, rtol=1e-14)
    return dc_volts, *closed_form(crest, ohms, diode_volts, dc_volts)


def integrated(crest, hertz, ohms, diode_volts, farads, drawn):
    """The same with ripple: the periodic solution of the capacitor's own equation.

    Returns mean DC volts, RMS current, real power into everything behind `ohms` (diodes included), ripple.
    """
    half = 0.5 / hertz

    def slopes(seconds, state):
        source = crest * abs(np.sin(2 * np.pi * hertz * seconds))
        dc = state[0]
        amps = max(0.0, (source - diode_volts - dc) / ohms)
        return [(amps - drawn(dc)) / farads, dc, amps**2, amps * (dc + diode_volts)]

    def half_period(start):
        found = solve_ivp(
            slopes, (0.0, half), [start, 0.0, 0.0, 0.0], method="RK45", rtol=1e-9, atol=1e-9, max_step=half / 60
        )
        return found.y

    guess = without_ripple(crest, ohms, diode_volts, drawn)[0]
    # At the zero crossing of the source the capacitor has been falling for a while: below the mean, above half of it.
    start = brentq(
        lambda volts: half_period(volts)[0, -1] - volts, 0.2 * guess, min(1.3 * guess, crest), xtol=1e-8
    )
    path = half_period(start)
    _, volt_seconds, square_seconds, energy = path[:, -1]
    ripple = path[0].max() - path[0].min()
    return volt_seconds / half, np.sqrt(square_seconds / half), energy / half, ripple

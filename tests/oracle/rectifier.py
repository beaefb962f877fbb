"""A bridge rectifier behind a lamp: tests/golden/rectifier.json (closed form) and rectifier_time.json (integrated).

The filament is held at the temperature that its own RMS current gives it; everything else runs in the time domain.
"""

import numpy as np
from scipy.optimize import brentq

from shared.files import write
from shared.lamp import STOCK, Lamp
from shared.rectifier import closed_form, integrated, without_ripple

CREST = np.sqrt(2) * 230.0
HERTZ = 50.0


def draw_of(kind, value):
    """DC amperes at DC volts."""
    if kind == "ohms":
        return lambda dc: dc / value
    if kind == "amps":
        # Gives way in the last per cent of the voltage.
        return lambda dc: value * np.clip(dc / (0.01 * (CREST - 1.4)), 0.0, 1.0)
    return lambda dc: value / max(dc, 1.0)


def settled(lamp, series_ohms, rms_at):
    """The filament temperature whose resistance lets through just the current that holds it."""

    def excess(kelvin):
        return np.sqrt(lamp.heat(kelvin) / lamp.ohms(kelvin)) - rms_at(lamp.ohms(kelvin) + series_ohms)

    return brentq(excess, 301.0, lamp.kelvin * 1.01, xtol=1e-6, rtol=1e-12)


CASES = [
    # lamp, series ohms (diodes' bulk, winding), draw; the reservoir for the time domain.
    (STOCK[60], 1.0, ("ohms", 1300.0), 100e-6),
    (STOCK[60], 1.0, ("ohms", 300.0), 100e-6),
    (STOCK[60], 1.0, ("ohms", 8000.0), 47e-6),
    (STOCK[100], 60.0, ("ohms", 1300.0), 100e-6),
    (STOCK[100], 60.0, ("ohms", 1300.0), 22e-6),
    (STOCK[200], 30.0, ("ohms", 600.0), 220e-6),
    (STOCK[25], 5.0, ("ohms", 5000.0), 22e-6),
    (STOCK[40], 5.0, ("amps", 0.05), 47e-6),
    (STOCK[150], 5.0, ("amps", 0.30), 220e-6),
]

closed, timed = [], []
for lamp, series, draw, farads in CASES:
    drawn = draw_of(*draw)
    inputs = {"lamp": lamp.inputs(), "supply_volts": 230.0, "hertz": HERTZ, "series_ohms": series}
    inputs |= {"diode_volts": 1.4, "draw": {draw[0]: draw[1]}, "farads": farads}

    kelvin = settled(lamp, series, lambda ohms: without_ripple(CREST, ohms, 1.4, drawn)[2])
    dc_volts, _, rms = without_ripple(CREST, lamp.ohms(kelvin) + series, 1.4, drawn)
    closed.append(inputs | {"kelvin": kelvin, "dc_volts": dc_volts, "amps": rms, "bank_volts": rms * lamp.ohms(kelvin)})

    at = lambda ohms: integrated(CREST, HERTZ, ohms, 1.4, farads, drawn)
    kelvin = settled(lamp, series, lambda ohms: at(ohms)[1])
    dc_volts, rms, watts, ripple = at(lamp.ohms(kelvin) + series)
    timed.append(
        inputs
        | {"kelvin": kelvin, "dc_volts": dc_volts, "amps": rms, "bank_volts": rms * lamp.ohms(kelvin)}
        | {"load_watts": watts + rms**2 * series, "ripple_volts": ripple}
    )
    print(
        f"{lamp.watts:5.0f} W {draw}: closed form {closed[-1]['amps']:.4f} A {closed[-1]['dc_volts']:.1f} V,"
        f" in time {rms:.4f} A {dc_volts:.1f} V, ripple {ripple:.1f} V"
    )
write("rectifier.json", closed)
write("rectifier_time.json", timed, digits=6)

# Constant power: every temperature at which pulse, filament and draw agree, by a fine sweep of the DC voltage.
cases = []
for lamp in (STOCK[60], STOCK[200], Lamp(120.0, 100.0, 2860.0, 0.115)):
    crest = np.sqrt(2) * min(lamp.volts, 230.0)
    dcs = np.linspace(2.0, crest - 1.5, 1500)

    def watts_at(dc):
        """Power into the draw with the reservoir held at `dc` and the filament settled."""
        def excess(kelvin):
            rms = closed_form(crest, lamp.ohms(kelvin) + 5.0, 1.4, dc)[1]
            return np.sqrt(lamp.heat(kelvin) / lamp.ohms(kelvin)) - rms

        kelvin = brentq(excess, 300.0 + 1e-7, 1.05 * lamp.kelvin, xtol=1e-9, rtol=1e-14)
        mean, rms = closed_form(crest, lamp.ohms(kelvin) + 5.0, 1.4, dc)
        return mean * dc, rms

    power = np.array([watts_at(dc)[0] for dc in dcs])
    for share in (0.05, 0.4, 0.9, 0.99, 1.02):
        watts = share * power.max()
        points = []
        for index in np.flatnonzero(np.diff(np.sign(power - watts))):
            dc = brentq(lambda dc: watts_at(dc)[0] - watts, dcs[index], dcs[index + 1], xtol=1e-11, rtol=1e-14)
            points.append({"dc_volts": dc, "amps": watts_at(dc)[1]})
        # In order of rising current.
        points.sort(key=lambda point: point["amps"])
        cases.append(
            {"lamp": lamp.inputs(), "supply_volts": crest / np.sqrt(2), "hertz": HERTZ, "series_ohms": 5.0}
            | {"diode_volts": 1.4, "watts": watts, "points": points}
        )
write("rectifier_power.json", cases)

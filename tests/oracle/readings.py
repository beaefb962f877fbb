"""What readings say, and how surely: tests/golden/readings_*.json.

- readings_jcgm.json: example H.2 of JCGM 100:2008 from its own data, by the package `uncertainties`.
- readings_uncertainty.json: current, power, power factor and resistance of made-up readings behind a lamp, with standard
  uncertainties by `uncertainties` from the same independent causes as the core's, here through explicit variables.
- readings_points.json: the sequence of Sobol with the direction numbers of Joe and Kuo, by scipy.
- readings_waveforms.json: equipment that distorts its current, integrated over one period with numpy: what true RMS and
  averaging meters show, and the real power as the mean of volts times amperes.
"""

import numpy as np
from scipy.interpolate import PchipInterpolator
from scipy.optimize import brentq
from scipy.stats.qmc import Sobol
from uncertainties import correlated_values, ufloat, umath, wrap

from shared import lamp as lamps
from shared.files import columns, write
from shared.lamp import STOCK, Lamp
from shared.tungsten import AMBIENT, SIGMA

# JCGM 100:2008, table H.2: five simultaneous observations of volts, milliamperes and phase.
VOLTS = [5.007, 4.994, 5.005, 4.990, 4.999]
MILLIAMPS = [19.663, 19.639, 19.640, 19.685, 19.678]
PHASE = [1.0456, 1.0438, 1.0468, 1.0428, 1.0433]


def jcgm():
    data = np.array([VOLTS, np.array(MILLIAMPS) * 1e-3, PHASE])
    covariance = np.cov(data) / data.shape[1]
    volts, amps, phase = correlated_values(data.mean(axis=1), covariance)
    resistance, reactance = volts / amps * umath.cos(phase), volts / amps * umath.sin(phase)
    impedance = volts / amps
    return {
        "means": list(data.mean(axis=1)),
        "covariance": [list(row) for row in covariance],
        "quantities": [
            {"name": name, "value": one.nominal_value, "deviation": one.std_dev}
            for name, one in [("ohms", resistance), ("reactance", reactance), ("impedance", impedance)]
        ],
    }


write("readings_jcgm.json", [jcgm()])

WATTS_LIMIT = (0.04, 0.5)  # 4 % + 0.5 W, rectangular
COVERAGE = 1.96


def uncertain(rating, readings, drift):
    """Readings: name -> (value, percent, digits, step); one meter, ranges told apart by their step."""
    gains = {}
    exact = {}
    for name, (value, percent, digits, step) in readings.items():
        gain = gains.setdefault(step if name.endswith("volts") else name, ufloat(0.0, percent / 100 / np.sqrt(3)))
        last_digits = ufloat(0.0, max(digits, 0.5) * step / np.sqrt(3))
        exact[name] = value * (1 + gain) + last_digits
        if drift and name != "supply_volts":
            exact[name] += ufloat(0.0, drift * value)
    volts, watts, kelvin, share = rating
    usual = Lamp(*rating)
    # The lamp's own spread: watts only, since temperature and gas share are given as exact.
    limit = (WATTS_LIMIT[0] * watts + min(WATTS_LIMIT[1], 0.04 * watts)) / watts / np.sqrt(3)
    size = ufloat(0.0, limit)
    # The other tables, either way, as the ends of 95 %.
    bank_volts = readings["bank_volts"][0]
    by_tables = [
        ufloat(0.0, abs(amps_by(rating, bank_volts, *tables) - usual.amps(bank_volts)) / COVERAGE)
        for tables in [(lamps_other_resistivity, None), (None, lamps_other_exitance)]
    ]
    amps_of = wrap(lambda vb, ln_size: Lamp(volts, watts * np.exp(ln_size), kelvin, share).amps(vb))
    lamp_amps = amps_of(exact["bank_volts"], size) + sum(by_tables)
    amps = lamp_amps
    if "amps" in exact:
        ways = [lamp_amps, exact["amps"]]
        weights = [1 / way.std_dev**2 for way in ways]
        amps = sum(way * weight for way, weight in zip(ways, weights)) / sum(weights)
    found = {"amps": amps}
    if "load_volts" in exact:
        vs, vb, vl = exact["supply_volts"], exact["bank_volts"], exact["load_volts"]
        found["load_watts"] = (vs**2 - vb**2 - vl**2) / (2 * vb / amps)
        found["load_power_factor"] = found["load_watts"] / (vl * amps)
        found["load_ohms"] = vl / amps
    return {name: {"value": one.nominal_value, "deviation": one.std_dev} for name, one in found.items()}


def other_tables():
    """The other published resistivity and exitance of tungsten."""
    rho = columns("tungsten_resistivity.csv")
    resistivity = PchipInterpolator(rho["kelvin"], rho["microohm_cm_white_minges_1997"])
    eps = columns("tungsten_total_emissivity.csv")
    rows = [
        (k, e)
        for k, e in zip(eps["kelvin"], eps["emissivity_matsumoto_1999_iter_fit"])
        if e is not None and k >= AMBIENT
    ]
    emissivity = PchipInterpolator(*zip(*rows))
    return resistivity, lambda kelvin: emissivity(kelvin) * SIGMA * kelvin**4


lamps_other_resistivity, lamps_other_exitance = other_tables()


def amps_by(rating, volts, resistivity=None, exitance=None):
    """The lamp's current by other tables."""
    usual = lamps.resistivity, lamps.exitance
    try:
        lamps.resistivity = resistivity or usual[0]
        lamps.exitance = exitance or usual[1]
        return Lamp(*rating).amps(volts)
    finally:
        lamps.resistivity, lamps.exitance = usual


uncertainty = []
for watts, drift, readings in [
    (100, 0.003, {"supply_volts": (233.0, 1.0, 2.0, 1.0), "bank_volts": (67.0, 1.0, 2.0, 0.1), "load_volts": (200.0, 1.0, 2.0, 1.0)}),
    (100, 0.0, {"supply_volts": (233.0, 0.5, 1.0, 1.0), "bank_volts": (28.0, 0.5, 1.0, 0.1), "load_volts": (220.0, 0.5, 1.0, 1.0)}),
    (60, 0.003, {"supply_volts": (231.0, 1.0, 3.0, 1.0), "bank_volts": (120.3, 1.0, 3.0, 0.1), "load_volts": (160.2, 1.0, 3.0, 0.1), "amps": (0.185, 1.5, 3.0, 0.001)}),
    (150, 0.01, {"bank_volts": (140.0, 2.0, 5.0, 0.1), "amps": (0.5, 2.0, 5.0, 0.001)}),
]:
    rating = (230.0, float(watts), STOCK[watts].kelvin, STOCK[watts].gas_share)
    uncertainty.append(
        {
            "lamp": dict(zip(["volts", "watts", "rated_kelvin", "gas_share"], rating)),
            "drift_percent": 100 * drift,
            "readings": {
                name: {"value": value, "percent": percent, "digits": digits}
                for name, (value, percent, digits, _) in readings.items()
            },
            "found": uncertain(rating, readings, drift),
        }
    )
# Numerical derivatives of the lamp end at about eight digits.
write("readings_uncertainty.json", uncertainty, digits=7)

# --- waveforms -------------------------------------------------------------------------------------------------------

ANGLE = (np.arange(100_000) + 0.5) / 100_000 * 2 * np.pi
CREST = np.sqrt(2) * 230.0


def rms(wave):
    return np.sqrt(np.mean(wave**2))


def averaging(wave):
    """What a meter shows that takes the mean of the absolute value for a sinusoid's."""
    return np.mean(np.abs(wave)) * np.pi / (2 * np.sqrt(2))


def reservoir(dc_volts):
    """A full-wave rectifier whose reservoir holds dc_volts."""

    def amps(source, ohms):
        return np.sign(source) * np.maximum(np.abs(source) - dc_volts, 0.0) / ohms

    return amps


def half_wave(extra_ohms):
    return lambda source, ohms: np.maximum(source, 0.0) / (ohms + extra_ohms)


def phase_cut(load_ohms, degrees):
    """A resistor behind a dimmer that closes so late in each half wave."""

    def amps(source, ohms):
        closed = np.mod(ANGLE, np.pi) >= np.radians(degrees)
        return np.where(closed, source, 0.0) / (ohms + load_ohms)

    return amps


def inductive(load_ohms, reactance):
    """Resistance and inductance, harmonic by harmonic."""

    def amps(source, ohms):
        spectrum = np.fft.rfft(source)
        order = np.arange(len(spectrum))
        return np.fft.irfft(spectrum / (ohms + load_ohms + 1j * order * reactance), len(source))

    return amps


SINE = CREST * np.sin(ANGLE)
# A mains with flattened crests, as in a house full of rectifiers.
FLAT = 0.995 * CREST * (np.sin(ANGLE) + 0.05 * np.sin(3 * ANGLE) + 0.03 * np.sin(5 * ANGLE))

waveforms = []
for note, watts, source, load in [
    ("reservoir", 60, SINE, reservoir(160.0)),
    ("reservoir held high", 100, SINE, reservoir(260.0)),
    ("reservoir held low", 40, SINE, reservoir(70.0)),
    ("one half wave", 100, SINE, half_wave(40.0)),
    ("dimmer", 60, SINE, phase_cut(300.0, 70.0)),
    ("inductance on a distorted mains", 100, FLAT, inductive(250.0, 600.0)),
    ("reservoir on a distorted mains", 60, FLAT, reservoir(180.0)),
]:
    lamp = STOCK[watts]

    def excess(kelvin):
        ohms = lamp.ohms(kelvin)
        return rms(load(source, ohms)) - np.sqrt(lamp.heat(kelvin) / ohms)

    kelvin = brentq(excess, 300.5, lamp.kelvin * 1.02, xtol=1e-9)
    ohms = lamp.ohms(kelvin)
    amps = load(source, ohms)
    bank, equipment = ohms * amps, source - ohms * amps
    case = {
        "note": note,
        "lamp": lamp.inputs(),
        "supply_volts": rms(source),
        "bank_volts": rms(bank),
        "load_volts": rms(equipment),
        "amps": rms(amps),
        "load_watts": np.mean(equipment * amps),
        "averaging": {"bank_volts": averaging(bank), "load_volts": averaging(equipment), "amps": averaging(amps)},
    }
    if note.startswith("reservoir") and source is SINE:
        case["half_angle"] = float(np.arccos(np.max(np.abs(equipment)) / CREST))
    waveforms.append(case)
write("readings_waveforms.json", waveforms)

# --- the points that a diagnosis draws its benches from ---------------------------------------------------------------

points = Sobol(16, scramble=False).random(256)
write("readings_points.json", [{"index": index, "point": list(points[index])} for index in [0, 1, 2, 3, 7, 100, 200, 255]])

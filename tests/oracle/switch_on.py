"""The first seconds after switch-on, integrated by scipy's LSODA: tests/golden/switch_on.json.

The same equations as the core's, put together another way: one function for Kirchhoff's laws at an instant, explicit
maxima for the diodes instead of edges, and a new start of the integration where a converter starts or stops.
"""

import sys
import time

import numpy as np
from scipy.integrate import solve_ivp

from shared.files import write
from shared.lamp import STOCK, Bank, Lamp
from shared.tungsten import AMBIENT, DENSITY, emissivity, heat_capacity, resistivity, SIGMA

RTOL = 1e-6
EXITANCE_AMBIENT = float(emissivity(AMBIENT)) * SIGMA * AMBIENT**4
SAMPLES = [0.01, 0.05, 0.1, 0.3, 1.0, 3.0]


class Filament:
    """A lamp's resistance, heat and thermal mass with everything constant worked out once."""

    def __init__(self, lamp, joules_at_rating=None):
        self.ohms_per = lamp.volts**2 / lamp.watts / float(resistivity(lamp.kelvin))
        self.lamp = lamp
        diameter, length, _ = lamp.wire()
        self.mass = DENSITY * length * np.pi * diameter**2 / 4
        if joules_at_rating is not None:
            grid = np.linspace(AMBIENT, lamp.kelvin, 2001)
            self.mass = joules_at_rating / np.trapezoid(heat_capacity(grid), grid)

    def ohms(self, kelvin):
        return self.ohms_per * float(resistivity(kelvin))

    def slope(self, watts, kelvin):
        lamp = self.lamp
        lost = lamp.radiation * (float(emissivity(kelvin)) * SIGMA * kelvin**4 - EXITANCE_AMBIENT)
        lost += lamp.film * (kelvin**1.7 - AMBIENT**1.7)
        return (watts - lost) / (self.mass * float(heat_capacity(kelvin)))


def kirchhoff(source, ohms, siemens, amps, rectifier=None):
    """Volts across the load and amperes in its rectifier: `siemens`, a current source and a rectifier in parallel."""
    idle = (source / ohms - amps) / (1 / ohms + siemens)
    if rectifier is None:
        return idle, 0.0
    held, series, half_wave = rectifier
    if (idle if half_wave else abs(idle)) <= held:
        return idle, 0.0
    sign = np.sign(idle)
    if series == 0.0:
        volts = sign * held
        return volts, (source - volts) / ohms - siemens * volts - amps
    volts = (source / ohms - amps + sign * held / series) / (1 / ohms + siemens + 1 / series)
    return volts, (volts - sign * held) / series


# Loads: `start` is the state when the switch closes; `parts` gives siemens, source amperes and rectifier at a state;
# `slopes` the state's slopes with the load's volts and the rectifier's amperes.


class Short:
    numbers = {"kind": "short"}
    start = []

    def parts(self, state):
        return 1e9, 0.0, None

    def slopes(self, state, volts, rectified):
        return []


class Impedance:
    def __init__(self, ohms, reactance_ohms, hertz=50.0):
        self.numbers = {"kind": "impedance", "ohms": ohms, "reactance_ohms": reactance_ohms}
        self.ohms, self.reactance, self.omega = ohms, reactance_ohms, 2 * np.pi * hertz
        self.start = [] if reactance_ohms == 0.0 else [0.0]

    def parts(self, state):
        if self.reactance == 0.0:
            return 1 / self.ohms, 0.0, None
        if self.reactance > 0.0:
            return 0.0, state[0], None
        return 1 / self.ohms, -state[0] / self.ohms, None

    def slopes(self, state, volts, rectified):
        if self.reactance == 0.0:
            return []
        if self.reactance > 0.0:
            return [(volts - self.ohms * state[0]) * self.omega / self.reactance]
        return [(volts - state[0]) / self.ohms * self.omega * -self.reactance]


class LampLoad:
    def __init__(self, lamp):
        self.numbers = {"kind": "lamp", "lamp": lamp.inputs()}
        self.filament = Filament(lamp)
        self.start = [AMBIENT]

    def parts(self, state):
        return 1 / self.filament.ohms(state[0]), 0.0, None

    def slopes(self, state, volts, rectified):
        return [self.filament.slope(volts**2 / self.filament.ohms(state[0]), state[0])]


class Rectifier:
    """`draw` is ohms, amps or watts with start, stop and restart."""

    def __init__(self, farads, series_ohms, diode_volts, draw, crest):
        self.numbers = {"kind": "rectifier", "farads": farads, "series_ohms": series_ohms}
        self.numbers |= {"diode_volts": diode_volts, "draw": draw}
        self.farads, self.series, self.diode, self.draw, self.crest = farads, series_ohms, diode_volts, draw, crest
        self.start = [0.0]
        self.runs = False

    def drawn(self, dc):
        if "ohms" in self.draw:
            return dc / self.draw["ohms"]
        if "amps" in self.draw:
            return self.draw["amps"] * np.clip(dc / (0.01 * (self.crest - self.diode)), 0.0, 1.0)
        return self.draw["watts"] / dc if self.runs else 0.0

    def parts(self, state):
        return 0.0, 0.0, (state[0] + self.diode, self.series, False)

    def slopes(self, state, volts, rectified):
        return [(abs(rectified) - self.drawn(state[0])) / self.farads]

    def dc(self, state):
        return state[0]


class PowerSupply:
    """Flux over its rated crest, reservoir, heater temperature."""

    LINEAR, FULL, JOULES_PER_WATT = 0.6, 1.4, 20.0

    def __init__(self, remanence=0.0, hertz=50.0, **numbers):
        self.__dict__.update(numbers)
        self.numbers = {"kind": "power-supply", "remanence": remanence} | numbers
        omega = 2 * np.pi * hertz
        self.flux_volt_seconds = np.sqrt(2) * self.rated_volts / omega
        # RMS of linear sin + ninth sin^9, from the means of sin^2, sin^10 and sin^18; the shares add up to one.
        means = 0.5, 63 / 256, 12155 / 65536
        linear, ninth = self.LINEAR / np.sqrt(means[0]), (1 - self.LINEAR) / np.sqrt(means[2])
        whole = np.sqrt(linear**2 * means[0] + ninth**2 * means[2] + 2 * linear * ninth * means[1])
        self.linear = self.magnetising_amps * linear / whole
        self.ninth = self.magnetising_amps * ninth / whole
        self.heater = None
        self.start = [remanence, 0.0]
        if self.heater_watts > 0.0:
            rating = Lamp(self.rated_volts, self.heater_watts, 1350.0, 0.0)
            self.heater = Filament(rating, self.JOULES_PER_WATT * self.heater_watts)
            self.start.append(AMBIENT)

    def magnetising(self, flux):
        inside = np.clip(flux, -self.FULL, self.FULL)
        slope = max(self.linear + 9 * self.ninth * self.FULL**8, np.sqrt(2) * self.rated_volts / (0.73 * self.winding_ohms))
        return self.linear * inside + self.ninth * inside**9 + slope * (flux - inside)

    def parts(self, state):
        siemens = 1 / self.core_ohms
        if self.heater is not None:
            siemens += 1 / self.heater.ohms(state[2])
        return siemens, self.magnetising(state[0]), (state[1] + self.diode_volts, self.winding_ohms, self.half_wave)

    def slopes(self, state, volts, rectified):
        emission = 1.0
        found = []
        if self.heater is not None:
            emission = np.clip((state[2] / 1350.0 - 0.75) / (0.93 - 0.75), 0.0, 1.0)
            found = [self.heater.slope(volts**2 / self.heater.ohms(state[2]), state[2])]
        # Half the windings' resistance is the primary's, and limits the core's own current.
        across = volts - 0.5 * self.winding_ohms * self.magnetising(state[0])
        charge = (abs(rectified) - emission * state[1] / self.draw_ohms) / self.farads
        return [across / self.flux_volt_seconds if self.magnetising_amps > 0.0 else 0.0, charge] + found

    def dc(self, state):
        return state[1]


class HalfShort:
    start = []

    def __init__(self, ohms):
        self.numbers = {"kind": "half-short", "ohms": ohms}
        self.ohms = ohms

    def parts(self, state):
        return 0.0, 0.0, (0.0, self.ohms, True)

    def slopes(self, state, volts, rectified):
        return []


class Degauss:
    """Thermistor rise over the one at which it trips, reservoir."""

    JOULES, BEND = 120.0, 0.05

    def __init__(self, cold_ohms, trip_watts, warm_ohms, volts, rectifier):
        self.numbers = {"kind": "degauss", "cold_ohms": cold_ohms, "trip_watts": trip_watts, "warm_ohms": warm_ohms}
        self.numbers["warm"] = rectifier.numbers
        self.cold, self.trip, self.rectifier = cold_ohms, trip_watts, rectifier
        self.growth = np.log(warm_ohms / cold_ohms) / (max(volts**2 / warm_ohms / trip_watts, 1.5) - 1)
        self.start = [0.0, 0.0]

    def siemens(self, rise):
        ramp = self.BEND * np.logaddexp(0.0, (rise - 1) / self.BEND)
        return np.exp(-self.growth * ramp) / self.cold

    def parts(self, state):
        return self.siemens(state[0]), 0.0, self.rectifier.parts(state[1:])[2]

    def slopes(self, state, volts, rectified):
        heated = volts**2 * self.siemens(state[0]) - self.trip * state[0]
        return [heated / self.JOULES] + self.rectifier.slopes(state[1:], volts, rectified)

    def dc(self, state):
        return state[1]


class Universal:
    """Current and speed."""

    start = [0.0, 0.0]

    def __init__(self, hertz=50.0, **numbers):
        self.__dict__.update(numbers)
        self.numbers = {"kind": "universal-motor"} | numbers
        self.henries = self.reactance_ohms / (2 * np.pi * hertz)

    def parts(self, state):
        return 0.0, state[0], None

    def slopes(self, state, volts, rectified):
        amps, speed = state
        back = (self.ohms + self.speed_ohms * max(speed, 0.0)) * amps
        load = self.standing_watts * np.tanh(speed / 0.003) + self.windage_watts * speed * abs(speed)
        return [(volts - back) / self.henries, (self.speed_ohms * amps**2 - load) / (2 * self.joules)]


class Induction:
    """Stator current, rotor current, speed."""

    start = [0.0, 0.0, 0.0]

    def __init__(self, hertz=50.0, **numbers):
        self.__dict__.update(numbers)
        self.numbers = {"kind": "induction-motor"} | numbers
        omega = 2 * np.pi * hertz
        stator, air, rotor = (
            self.stator_reactance_ohms / omega,
            self.magnetising_ohms / omega,
            self.rotor_reactance_ohms / omega,
        )
        self.inverse = np.linalg.inv([[stator + air, -air], [-air, air + rotor]])

    def parts(self, state):
        return 0.0, state[0], None

    def slopes(self, state, volts, rectified):
        amps, rotor_amps, speed = state
        rotor_ohms = self.rotor_ohms / max(1 - speed, 1e-4)
        drive = self.inverse @ [volts - self.stator_ohms * amps, -rotor_ohms * rotor_amps]
        sticking = max(self.breakaway_watts - self.steady_watts, 0.0) * np.exp(-((speed / 0.03) ** 2))
        load = (self.steady_watts + sticking) * np.tanh(speed / 0.003) + self.windage_watts * speed * abs(speed)
        return [*drive, (rotor_ohms * rotor_amps**2 - load) / (2 * self.joules)]


class Corrected:
    """Reservoir, mean square of the volts."""

    def __init__(self, watts, start_volts, stop_volts, restart_seconds, farads, crest, hertz):
        self.draw = {"watts": watts, "start_volts": start_volts, "stop_volts": stop_volts}
        self.draw["restart_seconds"] = restart_seconds
        self.numbers = {"kind": "corrected", "farads": farads, "draw": self.draw}
        self.farads, self.target, self.hertz = farads, 1.2 * crest, hertz
        self.runs = False
        self.start = [0.0, 0.0]

    def siemens(self, state):
        missing = (self.target - state[0]) / self.target
        taken = self.draw["watts"] * np.clip(1 + missing, 0.0, 2.2)
        return taken / max(state[1], 0.5 * self.draw["stop_volts"] ** 2) if self.runs else 0.0

    def parts(self, state):
        return self.siemens(state), 0.0, (state[0], 1e-3, False)

    def slopes(self, state, volts, rectified):
        drawn = self.draw["watts"] / state[0] if self.runs else 0.0
        pumped = self.siemens(state) * volts**2 / max(state[0], 1.0)
        return [(abs(rectified) + pumped - drawn) / self.farads, (volts**2 - state[1]) * self.hertz]

    def dc(self, state):
        return state[0]


def simulate(supply, bank, load, seconds, degrees):
    """Peak amperes, i2t over 0.1 s, samples."""
    volts, hertz, source_ohms = supply
    omega = 2 * np.pi * hertz
    phase = np.pi / 2 if hertz == 0.0 else np.radians(degrees)
    crest = volts if hertz == 0.0 else np.sqrt(2) * volts
    groups = [[Filament(lamp) for lamp in group] for group in bank.groups] if bank else []
    count = sum(len(group) for group in groups)

    def instant(time, state):
        kelvins = iter(state[:count])
        ohms = [[filament.ohms(next(kelvins)) for filament in group] for group in groups]
        group_ohms = [1 / sum(1 / one for one in group) for group in ohms]
        bank_ohms = sum(group_ohms)
        source = crest * np.sin(omega * time + phase)
        siemens, amps, rectifier = load.parts(state[count:-2])
        across, rectified = kirchhoff(source, bank_ohms + source_ohms, siemens, amps, rectifier)
        return (source - across) / (bank_ohms + source_ohms), across, rectified, ohms, group_ohms

    def slopes(time, state):
        amps, across, rectified, ohms, group_ohms = instant(time, state)
        kelvins = iter(state[:count])
        found = []
        for group, all_ohms, together in zip(groups, ohms, group_ohms):
            for filament, one in zip(group, all_ohms):
                found.append(filament.slope((amps * together) ** 2 / one, next(kelvins)))
        return found + list(load.slopes(state[count:-2], across, rectified)) + [amps**2, across**2]

    # A converter: integrate up to each change of its state.
    draw = getattr(load, "draw", {})
    state = np.array([AMBIENT] * count + list(load.start) + [0.0, 0.0])
    pieces, now, due = [], 0.0, None
    starts = []
    while now < seconds:
        events = []
        if "watts" in draw:
            level = draw["stop_volts"] if load.runs else draw["start_volts"]
            if due is None:
                crossing = lambda t, y: load.dc(y[count:-2]) - level
                crossing.terminal, crossing.direction = True, -1.0 if load.runs else 1.0
                events = [crossing]
        end = seconds if due is None else min(due, seconds)
        longest = 0.025 / hertz if hertz else seconds / 200
        found = solve_ivp(
            slopes, (now, end), state, "LSODA", rtol=RTOL, atol=1e-7, max_step=longest, events=events, dense_output=True
        )
        if not found.success:
            raise ArithmeticError(found.message)
        pieces.append(found.sol)
        now, state = found.t[-1], found.y[:, -1]
        if due is not None and now >= due:
            load.runs, due = True, None
            starts.append(now)
        elif found.status == 1:
            if load.runs:
                load.runs = False
            elif draw["restart_seconds"] > 0.0:
                due = now + draw["restart_seconds"]
            else:
                load.runs = True
                starts.append(now)

    def at(time):
        piece = next((piece for piece in pieces if time <= piece.t_max), pieces[-1])
        return piece(time)

    period = 1 / hertz if hertz else 0.0

    def sample(time):
        state = at(time)
        if hertz:
            before = at(max(time - period, 0.0))
            amps, across = np.sqrt(np.maximum(state[-2:] - before[-2:], 0.0) / period)
        else:
            amps, across = np.abs(instant(time, state)[:2])
        found = {"seconds": time, "lamp_kelvin": list(state[:count]), "amps_rms": amps, "load_volts_rms": across}
        if hasattr(load, "dc"):
            found["load_dc_volts"] = load.dc(state[count:-2])
        return found

    # The crests fall into the first periods, and once more where a converter starts.
    grid = np.concatenate([np.linspace(0.0, min(seconds, 0.1), 4001)] + [np.linspace(t, min(t + 0.04, seconds), 801) for t in starts[:3]])
    amps = [abs(instant(time, at(time))[0]) for time in grid]
    index = int(np.argmax(amps))
    return {
        "peak_amps": amps[index],
        "i2t_amp2_seconds": at(min(0.1, seconds))[-2],
        "starts": starts[:6],
        "samples": [sample(time) for time in SAMPLES if time <= seconds],
    }


MAINS = (230.0, 50.0, 0.0)
CREST = np.sqrt(2) * 230.0
ONE = lambda watts: Bank([[STOCK[watts]]])
RADIO = {
    "rated_volts": 230.0, "magnetising_amps": 0.05, "core_ohms": 23500.0, "heater_watts": 0.0, "winding_ohms": 70.0,
    "diode_volts": 2.3, "half_wave": False, "farads": 43e-6, "draw_ohms": 1900.0,
}
BARE_CORE = RADIO | {"draw_ohms": 1e9, "farads": 1e-7}
VALVES = {
    "rated_volts": 230.0, "magnetising_amps": 0.0, "core_ohms": 1e9, "heater_watts": 36.0, "winding_ohms": 44.0,
    "diode_volts": 14.0, "half_wave": True, "farads": 28e-6, "draw_ohms": 3300.0,
}
DRILL = {
    "ohms": 33.0, "reactance_ohms": 34.0, "speed_ohms": 133.0, "standing_watts": 9.0, "windage_watts": 21.0, "joules": 45.0,
}
FAN = {
    "stator_ohms": 86.0, "stator_reactance_ohms": 123.0, "magnetising_ohms": 1050.0, "rotor_ohms": 86.0,
    "rotor_reactance_ohms": 123.0, "steady_watts": 4.0, "windage_watts": 30.0, "breakaway_watts": 60.0, "joules": 20.0,
}
CONVERTER = {"watts": 60.0, "start_volts": 99.0, "stop_volts": 81.0, "restart_seconds": 0.15}

CASES = [
    ("short at the crest", MAINS, ONE(60), Short(), 1.0, 90.0),
    ("short at the zero", MAINS, ONE(100), Short(), 1.0, 0.0),
    ("short on 60 Hz at 40 degrees", (120.0, 60.0, 0.5), Bank([[Lamp(120.0, 100.0, 2860.0, 0.115)]]), Short(), 1.0, 40.0),
    ("mixed bank and resistor", MAINS, Bank([[STOCK[60], STOCK[25]], [STOCK[100]]]), Impedance(150.0, 0.0), 1.0, 90.0),
    ("lamp behind lamp", MAINS, ONE(100), LampLoad(STOCK[60]), 3.0, 90.0),
    ("coil at the zero", MAINS, ONE(100), Impedance(50.0, 200.0), 1.0, 0.0),
    ("capacitor at the crest", MAINS, ONE(100), Impedance(50.0, -200.0), 1.0, 90.0),
    ("bridge and reservoir", MAINS, ONE(60), Rectifier(100e-6, 1.0, 1.4, {"ohms": 1300.0}, CREST), 3.0, 90.0),
    ("bridge, constant current", MAINS, ONE(40), Rectifier(47e-6, 5.0, 1.4, {"amps": 0.05}, CREST), 3.0, 0.0),
    ("bridge on direct current", (230.0, 0.0, 1.0), ONE(60), Rectifier(100e-6, 1.0, 1.4, {"ohms": 1300.0}, 230.0), 3.0, 0.0),
    ("bridge straight on the mains", (230.0, 50.0, 0.4), None, Rectifier(100e-6, 5.0, 1.4, {"ohms": 1300.0}, CREST), 0.3, 90.0),
    ("converter that hunts", MAINS, ONE(60), Rectifier(100e-6, 5.0, 1.4, CONVERTER, CREST), 1.0, 90.0),
    ("converter that settles", MAINS, ONE(100), Rectifier(60e-6, 5.0, 1.4, CONVERTER | {"watts": 25.0}, CREST), 1.0, 90.0),
    ("radio behind a lamp", MAINS, ONE(60), PowerSupply(remanence=0.5, **RADIO), 1.0, 0.0),
    ("bare core straight on the mains", (230.0, 50.0, 0.4), None, PowerSupply(remanence=0.6, **BARE_CORE), 0.3, 0.0),
    ("valve set in series", MAINS, ONE(100), PowerSupply(**VALVES), 3.0, 90.0),
    ("shorted diode", MAINS, ONE(100), HalfShort(5.0), 1.0, 90.0),
    ("picture tube", MAINS, ONE(200), Degauss(25.0, 1.5, 11500.0, 230.0, Rectifier(160e-6, 5.0, 1.4, {"ohms": 1200.0}, CREST)), 1.0, 90.0),
    ("drill", MAINS, ONE(200), Universal(**DRILL), 1.0, 90.0),
    ("fan", MAINS, ONE(200), Induction(**FAN), 1.0, 0.0),
    ("corrected converter", MAINS, ONE(100), Corrected(30.0, 99.0, 81.0, 0.15, 60e-6, CREST, 50.0), 1.0, 90.0),
]


if __name__ == "__main__":
    if sys.argv[1:2] == ["--time"]:
        # For the bench: how long one case takes here, seconds.
        chosen = next(case for case in CASES if case[0] == sys.argv[2])
        began = time.perf_counter()
        simulate(*chosen[1:])
        print(time.perf_counter() - began)
        sys.exit()
    cases = []
    for note, supply, bank, load, seconds, degrees in CASES:
        found = simulate(supply, bank, load, seconds, degrees)
        inputs = {"note": note, "supply": dict(zip(("volts", "hertz", "ohms"), supply))}
        inputs |= {"bank": bank.inputs() if bank else None, "load": load.numbers, "seconds": seconds}
        cases.append(inputs | {"switch_degrees": degrees} | found)
        last = found["samples"][-1]
        print(f"{note}: peak {found['peak_amps']:.4f} A, then {last['amps_rms']:.4f} A, {last['lamp_kelvin']}")
    write("switch_on.json", cases, digits=7)

"""Banks with linear loads, lamps and constant powers: tests/golden/banks.json and constant_power.json."""

import numpy as np
from scipy.optimize import brentq, minimize_scalar

from shared.files import write
from shared.lamp import STOCK, Bank

BANKS = [
    Bank([[STOCK[60]]]),
    Bank([[STOCK[25], STOCK[100]]]),
    Bank([[STOCK[60]], [STOCK[100]]]),
    Bank([[STOCK[40], STOCK[40]], [STOCK[150]], [STOCK[200], STOCK[25], STOCK[60]]]),
]
# Series resistance and reactance of the load, ohms.
LOADS = [(0.0, 0.0), (5.0, 0.0), (529.0, 0.0), (20000.0, 0.0), (300.0, 200.0), (50.0, 900.0), (400.0, -350.0)]
SUPPLIES = [(230.0, 0.0), (120.0, 3.0)]


def settled(bank, supply_volts, supply_ohms, load):
    """The current at which source, bank and load use up the supply."""
    ohms, reactance = load

    def left(amps):
        drop = bank.volts(amps) + amps * (supply_ohms + ohms)
        return np.hypot(drop, amps * reactance) - supply_volts

    return brentq(left, 1e-9, bank.most_amps(supply_volts), xtol=1e-15, rtol=1e-14)


cases = []
for bank in BANKS:
    for volts, source in SUPPLIES:
        for load in LOADS:
            if source == 0.0 and load == (0.0, 0.0):
                amps = bank.most_amps(volts)
            else:
                amps = settled(bank, volts, source, load)
            cases.append(
                {"supply_volts": volts, "supply_ohms": source, "bank": bank.inputs(), "ohms": load[0]}
                | {"reactance_ohms": load[1], "amps": amps, "bank_volts": bank.volts(amps)}
                | {"load_volts": amps * np.hypot(*load), "load_watts": amps**2 * load[0], "lamps": bank.lamps(amps)}
            )
write("banks.json", cases)

# A constant power straight on direct current: all crossings of the bank's own power curve.
cases = []
for bank in BANKS:
    most_amps = bank.most_amps(230.0)
    yields = lambda amps: amps * (230.0 - bank.volts(amps))
    best = minimize_scalar(lambda amps: -yields(amps), bounds=(0.01 * most_amps, most_amps), options={"xatol": 1e-12})
    most = -best.fun
    for share in [0.02, 0.3, 0.8, 0.999, 1.02]:
        watts = share * most
        roots = []
        if share < 1.0:
            roots = [
                brentq(lambda amps: yields(amps) - watts, 1e-6 * most_amps, best.x, xtol=1e-15, rtol=1e-14),
                brentq(lambda amps: yields(amps) - watts, best.x, most_amps, xtol=1e-15, rtol=1e-14),
            ]
        cases.append({"supply_volts": 230.0, "bank": bank.inputs(), "watts": watts, "most_watts": most, "amps": roots})
write("constant_power.json", cases)

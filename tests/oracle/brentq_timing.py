"""How long scipy's brentq takes for one lamp and a resistor: tests/golden/brentq_timing.json.

A recorded figure, of the machine that last ran this; the bench shows it as such, beside one taken on the spot when it
finds a Python. With `--print` nothing is written.
"""

import json
import statistics
import sys
import time

from scipy.optimize import brentq

from shared.files import write
from shared.lamp import STOCK
from shared.tungsten import AMBIENT, HOTTEST

SUPPLY_VOLTS = 230.0
LOADS_OHMS = [100.0, 300.0, 529.0, 1000.0, 3000.0]
ROUNDS = 40

lamp = STOCK[60]


def solve(load_ohms):
    def left(kelvin):
        ohms = lamp.ohms(kelvin)
        return (lamp.heat(kelvin) / ohms) ** 0.5 * (ohms + load_ohms) - SUPPLY_VOLTS

    return brentq(left, AMBIENT + 1e-9, HOTTEST, rtol=1e-13, full_output=True)


rounds = []
for _ in range(ROUNDS):
    start = time.perf_counter()
    calls = [solve(ohms)[1].function_calls for ohms in LOADS_OHMS]
    rounds.append((time.perf_counter() - start) / len(LOADS_OHMS))
result = {
    "microseconds_per_solve": 1e6 * statistics.median(rounds),
    "function_calls_per_solve": sum(calls) / len(calls),
    "lamp": lamp.inputs(),
    "supply_volts": SUPPLY_VOLTS,
    "loads_ohms": LOADS_OHMS,
}
print(json.dumps(result))
if "--print" not in sys.argv:
    write("brentq_timing.json", [result], digits=4)

"""Lamp curves, wires and fluxes: tests/golden/lamp_curves.json and lamp_defaults.json."""

from shared.files import write
from shared.lamp import STOCK, Lamp, kelvin_for_lumens

SHARES = [0.001, 0.01, 0.05, 0.1, 0.2, 0.3, 0.5, 0.7, 0.9, 1.0, 1.1]

lamps = list(STOCK.values()) + [
    Lamp(120.0, 60.0, 2790.0, 0.135),
    Lamp(120.0, 100.0, 2860.0, 0.115),
    Lamp(230.0, 300.0, 2900.0, 0.06),
    Lamp(24.0, 21.0, 2700.0, 0.12),
    Lamp(12.0, 50.0, 3050.0, 0.10),
    Lamp(2.5, 0.75, 2200.0, 0.40),
]

curves = []
for lamp in lamps:
    diameter, length, capacity = lamp.wire()
    states = []
    for share in SHARES:
        volts = share * lamp.volts
        kelvin = lamp.kelvin_at_volts(volts)
        # Within 0.1 K of ambient this plain form of the equations has lost most of its digits.
        if kelvin > 300.1:
            states.append({"volts": volts, "amps": volts / lamp.ohms(kelvin), "kelvin": kelvin})
    curves.append(
        lamp.inputs()
        | {
            "cold_ohms": lamp.ohms(300.0),
            "wire_metres": length,
            "wire_diameter_metres": diameter,
            "rated_joules_per_kelvin": capacity,
            "rated_lumens": lamp.lumens(lamp.kelvin),
            "states": states,
        }
    )
write("lamp_curves.json", curves)

# Printed lumens decide the temperature; gas share given.
defaults = [
    {"volts": volts, "watts": watts, "lumens": lumens, "gas_share": share}
    | {"rated_kelvin": kelvin_for_lumens(lumens, watts, share)}
    for volts, watts, lumens, share in [
        (230.0, 25.0, 217.0, 0.0),
        (230.0, 60.0, 702.0, 0.2),
        (230.0, 100.0, 1326.0, 0.17),
        (230.0, 200.0, 3009.0, 0.13),
        (120.0, 60.0, 870.0, 0.135),
        (12.0, 50.0, 910.0, 0.10),
    ]
]
write("lamp_defaults.json", defaults)

"""Chromaticity and luminance of tungsten: tests/golden/glow.json."""

from shared.files import write
from shared.light import tristimulus

RATED = 2800.0
rated = tristimulus(RATED)[1]
cases = []
for kelvin in [800.0, 900.0, 1000.0, 1200.0, 1500.0, 1800.0, 2100.0, 2400.0, 2600.0, 2800.0, 3000.0, 3300.0]:
    x, y, z = tristimulus(kelvin)
    cases.append({"kelvin": kelvin, "x": x / (x + y + z), "y": y / (x + y + z), "relative_luminance": y / rated})
write("glow.json", cases)

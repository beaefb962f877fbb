"""Reference tables in, golden answers out."""

import csv
import json
import pathlib

TESTS = pathlib.Path(__file__).resolve().parents[2]


def columns(name):
    """The columns of a reference file as lists of floats, None where a cell is empty."""
    with open(TESTS / "reference" / name, newline="") as file:
        rows = list(csv.DictReader(file))
    return {key: [float(row[key]) if row[key] else None for row in rows] for key in rows[0]}


def rounded(value, digits):
    """The same structure with every float at so many significant digits: other machines differ beyond them."""
    if isinstance(value, float):
        return float(f"{value:.{digits}g}")
    if isinstance(value, dict):
        return {key: rounded(item, digits) for key, item in value.items()}
    if isinstance(value, (list, tuple)):
        return [rounded(item, digits) for item in value]
    return float(f"{float(value):.{digits}g}") if hasattr(value, "dtype") else value


def write(name, cases, digits=10):
    """Writes golden cases, one a line, so that a change shows as the lines that changed."""
    path = TESTS / "golden" / name
    lines = ",\n".join(json.dumps(rounded(case, digits)) for case in cases)
    path.write_text(f"[\n{lines}\n]\n")
    print(f"{path.relative_to(TESTS.parent)}: {len(cases)} cases")

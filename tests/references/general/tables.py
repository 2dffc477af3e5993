"""Writes the tables: kind, name, x, y, value, accuracy; compares them with the committed ones."""

import csv
import pathlib

HERE = pathlib.Path(__file__).resolve().parent
COLUMNS = ["kind", "name", "x", "y", "value", "accuracy"]


def text(value):
    """Shortest decimal that reads back as the same double."""
    return value if isinstance(value, str) else repr(float(value))


def differences(name, rows):
    """Where new rows differ from the committed table by more than its accuracy."""
    with open(HERE / f"{name}.csv", newline="", encoding="utf-8") as file:
        committed = [(*row[:4], float(row[4]), float(row[5])) for row in list(csv.reader(file))[1:]]
    if len(committed) != len(rows):
        return [f"{name}: {len(rows)} rows computed, {len(committed)} committed"]
    found = []
    for new, old in zip(rows, committed):
        what, value = tuple(map(text, new[:4])), float(new[4])
        # Written as doubles, values differ in their last digits at least.
        allowed = max(old[5], 1e-13 * abs(old[4]))
        if what != old[:4] or not abs(value - old[4]) <= allowed:
            found.append(f"{name}: computed {what} {value!r}, committed {old}")
    return found


def write(name, rows):
    with open(HERE / f"{name}.csv", "w", newline="", encoding="utf-8") as file:
        writer = csv.writer(file, lineterminator="\n")
        writer.writerow(COLUMNS)
        writer.writerows([[text(value) for value in row] for row in rows])
    print(f"{name}: {len(rows)} values")


def superposed(places, wells, transmissivity, ambient, green, accuracy):
    """Rows of ambient head, drawdown and head at named places."""
    rows = []
    for name, x, y in places:
        before = ambient(x, y)
        fall = sum(q * green(x, y, *at) for _, at, q in wells) / transmissivity
        for kind, value in (("ambient", before), ("drawdown", fall), ("head", before - fall)):
            rows.append((kind, name, x, y, value, accuracy))
    return rows


def inflows(wells, shares, accuracy):
    """Rows of inflow from each river, in all and to each well; shares(at) -> {river: share}."""
    of_well = {name: shares(*at) for name, at, _ in wells}
    rows = []
    for river in next(iter(of_well.values())):
        rows.append(("inflow", river, "", "", sum(q * of_well[name][river] for name, _, q in wells), accuracy))
        rows += [("inflow_by_well", f"{river} > {name}", "", "", q * of_well[name][river], accuracy)
                 for name, _, q in wells]
    return rows

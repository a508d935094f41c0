"""Random flashes: how many are verified, and is the phase count right?

    python -m tests.bench.measure_flash_robustness [--count 5000] [--first 0] [--check 300]
                                                   [--record FILE]

Mixtures of 2 to 8 of the open molecules at random temperature, pressure and composition, by four
tables. Each answer is verified by the flash itself; the first `--check` are also held against a
brute-force search (`brute_force.py`). With `--record` every finished case is written down, and a
run that was stopped goes on where it ended.
"""

import argparse
import json
import time
import warnings
from collections import Counter
from pathlib import Path

from groups.equilibrium import flash
from tests.bench.brute_force import lowest_distance
from tests.bench.random_mixtures import Case, cases

#: A composition this far below the plane of the answer is a phase that was missed.
MISSED = 1e-6


def measured(case: Case, *, check: bool) -> dict[str, object]:
    """One case: phases, reason of failure, and what brute force says."""
    warnings.simplefilter("error")
    start = time.thread_time()
    found = flash(case.system, case.temperature_K, case.pressure_kPa, case.feed)
    row: dict[str, object] = {
        "number": case.number,
        "phase": found.phase[0],
        "failure": found.failure[0],
        "milliseconds": round((time.thread_time() - start) * 1e3, 3),
    }
    if check and found.converged[0]:
        row["distance"] = lowest_distance(case.system, found, case.feed, case.number)
    return row


def main() -> None:
    """Run, or go on with, the cases; print the shares."""
    parser = argparse.ArgumentParser()
    parser.add_argument("--count", type=int, default=5000)
    parser.add_argument("--first", type=int, default=0)
    parser.add_argument("--check", type=int, default=300)
    parser.add_argument("--record", type=Path)
    options = parser.parse_args()
    rows: list[dict[str, object]] = []
    if options.record and options.record.exists():
        rows = [json.loads(line) for line in options.record.read_text("utf-8").splitlines()]
    for case in cases(options.count - len(rows), options.first + len(rows)):
        rows.append(measured(case, check=len(rows) < options.check))
        if options.record:
            with options.record.open("a", encoding="utf-8") as file:
                file.write(json.dumps(rows[-1]) + "\n")
        if len(rows) % 500 == 0:
            print(f"{len(rows)} of {options.count}", flush=True)
    report(rows)


def report(rows: list[dict[str, object]]) -> None:
    """Print shares, failures and missed phases."""
    failed = [row for row in rows if row["failure"] is not None]
    print(f"verified: {100.0 * (1.0 - len(failed) / len(rows)):.2f} % of {len(rows)}")
    print("phases:", dict(Counter(str(row["phase"]) for row in rows)))
    for text, count in Counter(str(row["failure"]) for row in failed).most_common():
        print(f"  {count} x {text}")
    print("failed:", [row["number"] for row in failed][:40])
    checked = [row for row in rows if "distance" in row]
    missed = [row for row in checked if float(str(row["distance"])) < -MISSED]
    print(f"held against brute force: {len(checked)}, a phase missed in {len(missed)}")
    print("missed:", [(row["number"], row["distance"]) for row in missed][:40])
    times = sorted(float(str(row["milliseconds"])) for row in rows)
    print(f"median {times[len(times) // 2]:.1f} ms, slowest {times[-1]:.0f} ms")


if __name__ == "__main__":
    main()

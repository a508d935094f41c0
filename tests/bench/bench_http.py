"""What the service adds to a calculation: `python tests/bench/bench_http.py`.

Prints the time from starting the process to a ready answer, and the cost of a diagram over HTTP as
a ratio to the same call in this process. Both are measured in one run, alternating, so that a busy
machine slows both alike; the median is shown.
"""

import json
import socket
import statistics
import subprocess
import sys
import time
from collections.abc import Callable

import httpx

from groups import prediction
from groups.prediction import Component
from groups.structure.molecule import molecule_from_smiles

REPEATS = 31
POINTS = (101, 1001)


def free_port() -> int:
    """A port that nothing listens on."""
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        return int(probe.getsockname()[1])


def started() -> tuple[subprocess.Popen[bytes], str, float]:
    """A service process, its address, and the seconds until it was ready."""
    port = free_port()
    begin = time.perf_counter()
    command = [sys.executable, "-m", "api.cli", "serve", "--port", str(port)]
    process = subprocess.Popen(command, stderr=subprocess.DEVNULL, stdout=subprocess.DEVNULL)
    address = f"http://127.0.0.1:{port}"
    while time.perf_counter() - begin < 60.0:
        try:
            if httpx.get(f"{address}/v1/ready", timeout=30.0).status_code == 200:
                return process, address, time.perf_counter() - begin
        except httpx.ConnectError:
            time.sleep(0.02)
    process.terminate()
    raise TimeoutError("The service was not ready within a minute.")


def medians(first: Callable[[], object], second: Callable[[], object]) -> tuple[float, float]:
    """Median seconds of two calls, made in turn."""
    taken: tuple[list[float], list[float]] = ([], [])
    for _ in range(REPEATS):
        for call, seconds in zip((first, second), taken, strict=True):
            begin = time.perf_counter()
            call()
            seconds.append(time.perf_counter() - begin)
    return statistics.median(taken[0]), statistics.median(taken[1])


def main() -> None:
    """Measure and print."""
    process, address, ready = started()
    print(f"ready after {ready:.2f} s")
    components = [Component(molecule_from_smiles(smiles)) for smiles in ("CCO", "O")]
    try:
        with httpx.Client(base_url=address, timeout=60.0) as http:
            for points in POINTS:
                body = {"kind": "Txy", "components": ["CCO", "O"], "pressure_kPa": 101.325}
                sent = json.dumps(body | {"points": points})
                headers = {"Content-Type": "application/json"}

                def over_http(sent: str = sent, headers: dict[str, str] = headers) -> object:
                    return http.post("/v1/diagrams", content=sent, headers=headers).json()

                def in_process(points: int = points) -> object:
                    return prediction.diagram(
                        "Txy", components, pressure_kPa=101.325, points=points
                    )

                alone, carried = medians(in_process, over_http)
                print(
                    f"{points} points: {1e3 * alone:.1f} ms in process, "
                    f"{1e3 * carried:.1f} ms over HTTP, ratio {carried / alone:.2f}"
                )
    finally:
        process.terminate()
        process.wait(timeout=10.0)


if __name__ == "__main__":
    main()

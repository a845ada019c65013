"""Speed and memory: ratios against a floor taken in the same run.

    python -m tests.benchmarks.speed

Machines differ and are busy; the best of several rounds is compared with the best of the floor's rounds.
"""

from __future__ import annotations

import json
import subprocess
import sys
import time
import tracemalloc
from collections.abc import Callable
from pathlib import Path

import numpy as np

SCENARIO = Path(__file__).with_name("six_elements.toml")
ROUNDS = 9


def best(action: Callable[[], object], rounds: int = ROUNDS) -> float:
    """Shortest of several timings in s."""
    times = []
    for _ in range(rounds):
        start = time.perf_counter()
        action()
        times.append(time.perf_counter() - start)
    return min(times)


def python(*arguments: str) -> Callable[[], object]:
    """A call of this interpreter."""
    return lambda: subprocess.run([sys.executable, *arguments], check=True, capture_output=True)


def import_cost() -> float:
    """`import pulseprop` beyond python itself, s."""
    return best(python("-c", "import pulseprop")) - best(python("-c", "pass"))


def send_cost() -> tuple[float, float]:
    """`pulseprop send` of six elements on 2^16 points, start to JSON, and `import numpy` as its floor; s."""
    command = ("-m", "pulseprop", "send", str(SCENARIO), "--json", "-")
    return best(python(*command), 5), best(python("-c", "import numpy"), 5)


def send_compiles_nothing() -> bool:
    """Whether the run leaves the just-in-time compiler unloaded."""
    code = f"import sys; import pulseprop as pp; pp.send({str(SCENARIO)!r}); print('numba' in sys.modules)"
    done = subprocess.run([sys.executable, "-c", code], check=True, capture_output=True, text=True)
    return done.stdout.strip() == "False"


def linear_core_ratio(points: int = 1 << 16) -> float:
    """The linear core, transfers known, over one forward and one backward measured-plan FFT of its length."""
    from pulseprop.numerics.plans import Plan
    from pulseprop.propagation.linear import apply_known_transfer

    plan = Plan(points, effort="measure")
    plan.buffer[:] = 1.0
    transfer = np.exp(1j * np.linspace(0, 40, points)) * plan.scale

    def floor() -> None:
        plan.to_spectrum()
        plan.to_field()
        plan.buffer[0] = 1.0

    def rescaled() -> None:
        plan.buffer[:] = 1.0

    ratios = []
    for _ in range(5):
        rescaled()
        core = best(lambda: apply_known_transfer(plan, transfer), 40)
        rescaled()
        base = np.inf
        for _ in range(40):
            rescaled()
            base = min(base, best(floor, 1))
        ratios.append(core / base)
    return float(np.median(ratios))


def arrays_at_peak(points: int = 1 << 18) -> float:
    """Peak memory of a linear run in complex arrays of its length."""
    import pulseprop as pp

    scenario = pp.read(SCENARIO, (f"grid.points={points}",))
    peaks = []
    for _ in range(3):  # modules that load in the first run are no arrays of it
        tracemalloc.start()
        pp.send(scenario)
        peaks.append(tracemalloc.get_traced_memory()[1])
        tracemalloc.stop()
    return min(peaks) / (16 * points)


def main() -> None:
    sent, floor = send_cost()
    figures = {
        "import pulseprop beyond python, ms (at most 250)": 1e3 * import_cost(),
        "send, six elements, 2^16 points, s (at most 1.2)": sent,
        "the same over `import numpy`": sent / floor,
        "send leaves the compiler unloaded": send_compiles_nothing(),
        "linear core over two measured FFTs (at most 1.5)": linear_core_ratio(),
        "peak memory of a linear run, complex arrays of its length (at most 12)": arrays_at_peak(),
    }
    print(json.dumps(figures, indent=2))


if __name__ == "__main__":
    main()

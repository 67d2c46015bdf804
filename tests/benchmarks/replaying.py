"""How long 1,000 scenarios take to replay, from the command line to the last line printed.

On a busy machine the seconds of processor time tell more than those on the clock; both are printed.

Run by hand: python -m tests.benchmarks.replaying
"""

import os
import random
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Iterator
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent.parent
SHIPPED = ROOT / "scenarios" / "rolling_bearing"
COUNT, ROUNDS, BAR = 1_000, 3, 8.0
CHANGES = ("running_temperature_c: {} °C", "start_temperature_c: {} °C", "load_ratio: 0.{:02}")


def main() -> None:
    """Make the scenarios, replay them in a process of their own, and print seconds beside the bar."""
    with tempfile.TemporaryDirectory() as folder:
        for name, text in made(COUNT, 5):
            (Path(folder) / name).write_text(text, encoding="utf-8")
        seconds = [replayed(Path(folder)) for _ in range(ROUNDS)]
    used = os.times()
    processor = (used.children_user + used.children_system) / ROUNDS
    median = statistics.median(seconds)
    told = f"{', '.join(f'{one:.2f}' for one in seconds)}; bar {BAR:g} s; {'met' if median <= BAR else 'MISSED'}"
    sys.stdout.write(f"{COUNT} scenarios: median {median:.2f} s of {told}; processor {processor:.2f} s\n")


def made(count: int, seed: int) -> Iterator[tuple[str, str]]:
    """The shipped scenarios, then their variants: each takes over the answers of one, and changes one number."""
    draw = random.Random(seed)
    shipped = sorted(SHIPPED.glob("*.yaml"))
    for file in shipped:
        yield file.name, file.read_text(encoding="utf-8")
    for number in range(count - len(shipped)):
        change = draw.choice(CHANGES).format(draw.randrange(5, 90))
        text = (
            f'format: 1\ntitle: "Variant {number}"\npoint_kind: rolling_bearing\nguards: "It is measured."\n'
            f"status: agreed\nlike: {draw.choice(shipped).stem}\nanswers: {{{change}}}\nexpect: {{state: settled}}\n"
        )
        yield f"made_{number:04}.yaml", text


def replayed(folder: Path) -> float:
    """The seconds that one replay of the folder takes."""
    begun = time.perf_counter()
    done = subprocess.run(
        [sys.executable, "-m", "advisor", "replay", str(folder)], cwd=ROOT, capture_output=True, text=True, check=False
    )
    seconds = time.perf_counter() - begun
    if done.returncode not in {0, 1} or f"{COUNT} scenarios replayed" not in done.stdout:
        sys.exit(done.stderr or done.stdout[-500:])
    return seconds


if __name__ == "__main__":
    main()

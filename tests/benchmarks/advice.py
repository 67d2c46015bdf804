"""How long one advice takes with 300 different products on the shelf, as an object and as JSON.

Run by hand: python -m tests.benchmarks.advice
"""

import gc
import random
import statistics
import sys
import time
from collections.abc import Callable
from dataclasses import replace
from functools import partial
from pathlib import Path

from advisor.advice import Advisor
from advisor.answers import read_case
from advisor.conditions import Value
from advisor.documents import Problems
from advisor.explanation import as_json
from advisor.knowledge import Knowledge, load

ROOT = Path(__file__).resolve().parent.parent.parent
ROUNDS = 60
CASES = ("hot_wet_roller_table", "dry_motor_bearing", "vibrating_screen", "unlabelled_brown_grease")


def generated(knowledge: Knowledge, count: int, seed: int) -> Knowledge:
    """The knowledge with a shelf of products no two of which are alike."""
    draw = random.Random(seed)
    products = []
    for number in range(count):
        model = draw.choice(knowledge.shelf)
        values: dict[str, Value] = {}
        for name, value in model.values.items():
            measure = isinstance(value, float) and not knowledge.properties[name].domain.places
            values[name] = round(value * draw.uniform(0.97, 1.03), 3) if measure and isinstance(value, float) else value
        products.append(replace(model, item=f"GX-{number:03}", values=values))
    return replace(knowledge, shelf=tuple(products))


def median_ms(work: Callable[[], object]) -> float:
    """The median CPU time of some rounds: other work on the machine counts little."""
    work()
    times = []
    for _ in range(ROUNDS):
        start = time.process_time()
        work()
        times.append(time.process_time() - start)
    return statistics.median(times) * 1000


def main() -> None:
    """Print the medians, case by case."""
    knowledge = generated(load(ROOT / "knowledge"), 300, seed=1)
    advisor = Advisor(knowledge)
    gc.freeze()  # as the commands do once the knowledge is loaded
    write = sys.stdout.write
    write(f"{'case':<28} {'object ms':>10} {'JSON ms':>9} {'JSON kB':>9}   300 products, median of {ROUNDS}\n")
    for name in CASES:
        saved = read_case(ROOT / "scenarios" / "rolling_bearing" / f"{name}.yaml", knowledge, Problems())
        if saved is None:
            write(f"{name:<28} names a product that the generated shelf does not have\n")
            continue
        advice = advisor.advise(saved.case)
        made = median_ms(partial(advisor.advise, saved.case))
        written = median_ms(partial(as_json, advice))
        write(f"{name:<28} {made:>10.2f} {written:>9.2f} {len(as_json(advice).encode()) / 1000:>9.0f}\n")


if __name__ == "__main__":
    main()

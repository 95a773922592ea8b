"""Location texts read, placed and written per second of one core.

Process time is counted, in short batches of which the best of several rounds is taken:
another program's load falls on some rounds only. Every text is another one, drawn with
a fixed seed on the demonstration type.
"""

from __future__ import annotations

import argparse
import hashlib
import json
import random
import time
from collections.abc import Callable, Iterable
from pathlib import Path
from typing import Any

from fleet.location import LocationRefused, place, read, text_at, vocabulary_of
from fleet.location.geometry import geometry_from_toml

FILE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"
TEXTS, BATCH, ROUNDS = 1000, 100, 20
WANTED = 20_000
REFERENCE = b"\0" * (1024 * 1024)


def drawn(chance: random.Random) -> str:
    """One text in one of the notations of work orders."""
    n, side = chance.randint(2, 20), chance.choice("LR")
    frame, plus = (
        chance.randint(4, 44),
        chance.choice(["3", "7.5", "12", "3/4 in", "38mm"]),
    )
    station = 100 + 20 * frame
    hand = {"L": "LH", "R": "RH"}[side]
    return chance.choice(
        [
            f"STA {station}+{plus} S-{n}{side}",
            f"sta {station} + {plus} str {n} {hand.lower()}",
            f"FR {frame}-{frame + 1} between STR {n} & {n + 1} {hand}",
            f"BS {station} {side}BL 40 WL {chance.randint(185, 195)}",
            f"STA {station}, {plus.split()[0].removesuffix('mm')} in below S-{n}{side}",
            f"{n} in aft of FR {frame} S-{n}{side}",
            f"FR {frame} {chance.randint(1, 12)} o'clock",
            f"{hand} wing WS {10 * frame + n} lower skin aft of rear spar",
            f"{hand} WING RIB {min(n, 20)} UPPER SKIN",
            f"Stations {station}-{station + n} stringer {n}{side}",
            f"FLOOR BEAM STA {station} {side}BL {n}",
            f"FIN STA {5 * n} {hand}",
            f"STA {station} S-{n}{side} lap joint",
        ]
    )


def batches(items: list[Any]) -> Iterable[list[Any]]:
    return (items[i : i + BATCH] for i in range(0, len(items), BATCH))


def per_second(job: Callable[[Any], object], items: list[Any]) -> float:
    """Items a second: each batch at its best of several rounds."""
    best = [float("inf")] * -(-len(items) // BATCH)
    for _ in range(ROUNDS):
        for number, batch in enumerate(batches(items)):
            began = time.process_time()
            for item in batch:
                job(item)
            best[number] = min(best[number], time.process_time() - began)
    return len(items) / sum(best)


def reference_ms() -> float:
    """A fixed piece of work, SHA-256 over 1 MiB, at its best: the machine's speed."""
    times = []
    for _ in range(ROUNDS):
        began = time.process_time()
        hashlib.sha256(REFERENCE).hexdigest()
        times.append(time.process_time() - began)
    return 1000.0 * min(times)


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--json", action="store_true", help="print JSON")
    options = parser.parse_args()
    geometry = geometry_from_toml(FILE.read_text())
    words, chance = vocabulary_of(geometry), random.Random(52)
    texts = list(dict.fromkeys(drawn(chance) for _ in range(2 * TEXTS)))[:TEXTS]
    readings, places = [], []
    for text in texts:
        reading = read(text, words)
        try:
            places.append(place(reading, geometry, "base"))
            readings.append(reading)
        except LocationRefused:
            continue
    written = [
        (p.section, (p.x1_mm, p.x2_mm), None if p.s1_mm is None else (p.s1_mm, p.s2_mm))
        for p in places
    ]
    figures = {
        "texts": len(texts),
        "placed": len(readings),
        "reference ms": round(reference_ms(), 3),
        "read per second": round(per_second(lambda t: read(t, words), texts)),
        "placed per second": round(
            per_second(lambda r: place(r, geometry, "base"), readings)
        ),
        "written per second": round(
            per_second(
                lambda w: text_at(geometry, "base", w[0], along=w[1], across=w[2]),
                written,
            )
        ),
    }
    if options.json:
        print(json.dumps(figures, indent=1))
        return
    for name, figure in figures.items():
        print(f"{name:<22}{figure:>12,}")
    met = figures["read per second"] >= WANTED
    print(f"{WANTED:,} readings a second: {'met' if met else 'NOT met'}")


if __name__ == "__main__":
    main()

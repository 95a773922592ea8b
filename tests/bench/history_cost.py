"""What the history adds to a service call: at most 5 ms.

python -m tests.bench.history_cost [--server postgres://postgres@127.0.0.1:5432/postgres]

Two calls are timed with and without their history, turn by turn so that both see the
same machine: five bare rows, and a finding recorded with its measurement.
"""

from __future__ import annotations

import argparse
import itertools
import statistics
import time
from collections.abc import Callable

from tests.bench.throwaway import throwaway

LIMIT_MS = 5.0
TIMES = 200


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--server", default="", help="a PostgreSQL server; else SQLite")
    parser.add_argument("--times", type=int, default=TIMES)
    options = parser.parse_args()
    with throwaway(options.server):
        import django

        django.setup()
        print(f"{'call':<32}{'without':>10}{'with':>10}{'history':>10}{'ratio':>8}")
        for what, call in calls().items():
            without, with_it = compared(call, options.times)
            print(
                f"{what:<32}{without:>8.2f}ms{with_it:>8.2f}ms"
                f"{with_it - without:>8.2f}ms{with_it / without:>8.2f}"
                f"  {'within' if with_it - without <= LIMIT_MS else 'BEYOND'} 5 ms"
            )


def compared(call: Callable[[], object], times: int) -> tuple[float, float]:
    """Milliseconds without and with the history: of each the first decile, which
    other work on the machine disturbs least."""
    from fleet.services.history import Writing

    kept = Writing._note, Writing._append
    took: dict[bool, list[float]] = {False: [], True: []}
    for with_history in itertools.islice(itertools.cycle([True, False]), 2 * times):
        if not with_history:
            Writing._note = lambda *_: None  # type: ignore[method-assign]
        began = time.perf_counter()
        call()
        took[with_history].append((time.perf_counter() - began) * 1_000)
        Writing._note, Writing._append = kept  # type: ignore[method-assign]
    return tuple(statistics.quantiles(took[each], n=10)[0] for each in (False, True))  # type: ignore[return-value]


def calls() -> dict[str, Callable[[], object]]:
    from fleet.models import Organisation
    from fleet.services.history import Writing
    from tests.factories import NOW
    from tests.record_rows import found, world_make

    world, numbers = world_make(), itertools.count()

    def five_rows() -> None:
        with Writing(actor=world.engineer, action="organisation_create", at=NOW) as w:
            for _ in range(5):
                code = f"X{next(numbers)}"
                w.create(Organisation(code=code, name=code, kind="operator"))

    return {"five bare rows": five_rows, "a finding recorded": lambda: found(world)}


if __name__ == "__main__":
    main()

"""Growth through a sequence, as lines of the note and as drawn curves."""

from __future__ import annotations

from repairs.analysis.growth.blocks import CycleBlock
from repairs.analysis.growth.by_cycle import Following, SequenceGrowth, SequenceLife
from repairs.analysis.growth.two_directions import BREAK_THROUGH_RULE, History
from repairs.analysis.note import Note
from repairs.analysis.types import Curve

FROM_FLAW = "from the flaw"


def write_sequence_life(note: Note, life: SequenceLife, following: Following) -> None:
    """Write a sequence's life down; the retarded one beside it, with its cautions.

    The result rests on the life without retardation alone.
    """
    plain = life.unretarded
    if life.counting:
        note.text(life.counting)
    if plain.break_through is not None:
        note.text(BREAK_THROUGH_RULE)
        note.step(
            "N_bt",
            "cycles until the crack is through",
            f"length there {plain.break_through.length:.2f} mm",
            plain.break_through.cycles,
            "cycles",
        )
    note.step("N", "Σ da/dN, cycle by cycle", _ended(plain), plain.flights, "flights")
    model = following.retardation
    if life.retarded is None or model is None:
        return
    note.beside(
        "N_ret",
        f"the same with retardation: {model.in_words}",
        f"{_ended(life.retarded)}; fitted on: {model.evidence.source}",
        life.retarded.flights,
        "flights",
        model.reference,
    )
    for caution in life.cautions:
        note.warn(caution)


def _ended(growth: SequenceGrowth) -> str:
    return f"{growth.cycles:,} cycles; {growth.end}, {growth.length:.2f} mm"


def growth_curves(life: SequenceLife, block: CycleBlock) -> tuple[Curve, ...]:
    """Return crack length on flights, and the retarded growth as a curve of its own."""
    share = block.flights / block.cycles
    found = [_curve("growth", "Growth", life.unretarded.history, share)]
    if life.retarded is not None:
        history = life.retarded.history
        title = "Growth with retardation, for comparison"
        found.append(_curve("growth_retarded", title, history, share))
    return tuple(found)


def _curve(key: str, title: str, history: History, share: float) -> Curve:
    flights, lengths = (history.cycles * share).tolist(), history.length.tolist()
    return Curve(
        key,
        title,
        f"flights {FROM_FLAW}",
        "flights",
        "crack length along the surface",
        "mm",
        tuple(zip(flights, lengths, strict=True)),
    )

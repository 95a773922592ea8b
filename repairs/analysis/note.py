"""The calculation note: numbered lines, one step each, with source and grade."""

from __future__ import annotations

from repairs.analysis.types import ROOT_1000, Grade, NoteLine, Reference, Sourced


class Note:
    """Collects note lines in order and remembers what bars the result.

    Every number a method uses passes through here, so that a value from memory
    cannot be used without the result saying so.
    """

    def __init__(self, first: int = 1) -> None:
        self._first = first
        self._lines: list[NoteLine] = []
        self._barred: list[str] = []
        self._warnings: list[str] = []
        self._beside: set[int] = set()

    def given(self, symbol: str, title: str, value: Sourced) -> float:
        """Write down an input and return its number."""
        self._append(symbol, title, "", value.value, value.unit, value)
        return value.value

    def toughness(self, value: Sourced) -> float:
        """Write a fracture toughness down in MPa√m; return it in MPa*sqrt(mm)."""
        self._append(
            "K_c",
            "fracture toughness of this sheet",
            "",
            value.value / ROOT_1000,
            "MPa√m",
            value,
        )
        return value.value

    def step(
        self,
        symbol: str,
        formula: str,
        substitution: str,
        value: float | None,
        unit: str,
        reference: Reference | None = None,
    ) -> float | None:
        """Write down a calculated value and return it."""
        self._append(symbol, formula, substitution, value, unit, reference)
        return value

    def beside(
        self,
        symbol: str,
        formula: str,
        substitution: str,
        value: float,
        unit: str,
        reference: Reference,
    ) -> None:
        """Write down a value for comparison, on which the result does not rest."""
        self._append(symbol, formula, substitution, value, unit, reference)
        self._beside.add(self._lines[-1].number)

    def text(self, statement: str) -> None:
        """Write down an assumption or a finding that has no number."""
        self._append("", statement, "", None, "", None)

    def warn(self, warning: str, *, bars: bool = False) -> None:
        """Add a warning once; `bars` keeps the result from approval."""
        if warning not in self._warnings:
            self._warnings.append(warning)
        if bars and warning not in self._barred:
            self._barred.append(warning)

    @property
    def lines(self) -> tuple[NoteLine, ...]:
        """All lines so far, numbered from the first."""
        return tuple(self._lines)

    @property
    def warnings(self) -> tuple[str, ...]:
        """All warnings so far, in the order they arose."""
        memory = self._from_memory()
        return (*self._warnings, *((memory,) if memory else ()))

    @property
    def barred(self) -> tuple[str, ...]:
        """Reasons why nobody may approve this result as it stands."""
        memory = self._from_memory()
        return (*self._barred, *((memory,) if memory else ()))

    @property
    def source_from_memory(self) -> bool:
        """Whether a line rests on a value nobody has seen in print."""
        return bool(self._from_memory())

    def _from_memory(self) -> str:
        lines = [
            str(line.number)
            for line in self._lines
            if line.grade is Grade.MEMORY and line.number not in self._beside
        ]
        if not lines:
            return ""
        word = "line" if len(lines) == 1 else "lines"
        return (
            f"From memory, unverified ({word} {', '.join(lines)} of the note): "
            "barred from approval until adopted."
        )

    def _append(
        self,
        symbol: str,
        formula: str,
        substitution: str,
        value: float | None,
        unit: str,
        origin: Reference | Sourced | None,
    ) -> None:
        self._lines.append(
            NoteLine(
                number=self._first + len(self._lines),
                symbol=symbol,
                formula=formula,
                substitution=substitution,
                value=value,
                unit=unit,
                source=origin.source if origin else "",
                grade=origin.grade if origin else None,
            )
        )

"""One figure of the benchmark: ours against a baseline, measured in the same run."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Row:
    """A line of the table; the ratio may not pass its limit, or must reach it if `is_at_least`."""

    figure: str
    ours: str
    baseline: str
    ratio: float
    limit: float
    is_at_least: bool

    @property
    def holds(self) -> bool:
        """Whether the figure is met."""
        return self.ratio >= self.limit if self.is_at_least else self.ratio <= self.limit

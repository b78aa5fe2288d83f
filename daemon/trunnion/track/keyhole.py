"""The first joint where it cannot keep up: which error is the least, and the way that has it.

Below a level of error the joint must stay within bands round its branches, which makes a corridor;
whether a corridor can be passed is known exactly, so the least level is found by bisection.
"""

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from math import ceil

import numpy as np

from trunnion.mount.arrays import FloatArray, Motions, joint_errors_deg
from trunnion.mount.mount import Mount
from trunnion.track.bands import half_widths_deg
from trunnion.track.branches import IntArray, motions_on
from trunnion.track.corridor import State, passable_states, walls
from trunnion.track.following import follow
from trunnion.track.objective import Objective
from trunnion.track.polygon import Polygon, contains
from trunnion.track.windows import BoolArray

MOST_STEPS = 220
"""Longer windows are of slower mounts, and are stepped through more widely."""

LEVEL_SHARE = 0.002
LEVEL_DEG = 1e-5
"""How well the least level is found: this share of it, and never better than this angle."""

SPLITS = (0.5, 0.3, 0.7, 0.15, 0.85, 0.05, 0.95)
"""Which share of the time outside the beam lies after the middle of the keyhole."""


@dataclass(frozen=True)
class Keyhole:
    """Some samples of a course and the branch of each; the joint comes from `start` if given."""

    motions: Motions
    branch: IntArray
    mount: Mount
    step_s: float
    start: State | None

    def way(self, objective: Objective, half_beam_deg: float) -> list[State]:
        """The states of the first joint at the samples."""
        states = self._least(objective, half_beam_deg)
        goals = self._goals()
        start = self.start or nearest_state(states[0], goals[0])
        return list(follow(start, goals, states, self.mount.first, self.step_s))

    def can_keep(self, level_deg: float) -> bool:
        """Whether there is a way with no larger error than this (180: any way at all)."""
        return self._passes(level_deg, np.ones(len(self.branch), dtype=bool))

    def _least(self, objective: Objective, half_beam_deg: float) -> list[Polygon]:
        whole = np.ones(len(self.branch), dtype=bool)
        if objective is Objective.TIME_OUTSIDE_BEAM and not self.can_keep(half_beam_deg):
            gap = self._shortest_gap(half_beam_deg)
            return self._least_within(gap, half_beam_deg)
        return self._least_within(whole, 0.0)

    def _least_within(self, gap: BoolArray, level_outside_deg: float) -> list[Polygon]:
        """The states that keep the least level in the gap, and another one outside of it."""

        def is_enough(level_deg: float) -> bool:
            return self._passable(self._levels(level_deg, gap, level_outside_deg)) is not None

        least_deg = bisected(is_enough, level_outside_deg, 180.0)
        return self._passable(self._levels(least_deg, gap, level_outside_deg)) or []

    def _shortest_gap(self, level_deg: float) -> BoolArray:
        """The shortest time for which the level has to be given up, as a mask of samples."""
        middle = int(np.argmax(np.abs(self.motions.second_deg)))
        best, best_split = 2 * len(self.branch), SPLITS[0]
        for split in SPLITS:
            low, high = 0, best
            if not self._passes(level_deg, self._gap(middle, best - 1, split), 180.0):
                continue
            while high - low > 1:
                tried = (low + high) // 2
                if self._passes(level_deg, self._gap(middle, tried, split), 180.0):
                    high = tried
                else:
                    low = tried
            best, best_split = high, split
        return self._gap(middle, best, best_split)

    def _gap(self, middle: int, length: int, split: float) -> BoolArray:
        begin = middle - round(length * (1.0 - split))
        index = np.arange(len(self.branch))
        return np.asarray((index >= begin) & (index < begin + length))

    def _passes(self, level_deg: float, gap: BoolArray, gap_level_deg: float | None = None) -> bool:
        inside_deg = level_deg if gap_level_deg is None else gap_level_deg
        return self._passable(self._levels(inside_deg, gap, level_deg)) is not None

    def _levels(self, inside_deg: float, gap: BoolArray, outside_deg: float) -> FloatArray:
        return np.maximum(np.where(gap, inside_deg, outside_deg), self._unavoidable_deg)

    @cached_property
    def _unavoidable_deg(self) -> FloatArray:
        """The error that the travel alone makes, with room for the first joint to come to rest."""
        first, second = self.mount.first, self.mount.second
        goal = motions_on(self.motions, self.branch, second)
        room_deg = first.acceleration_deg_s2 * self.step_s**2 / 8.0
        is_beyond = (goal.first_deg < first.soft_lower_deg) | (
            goal.first_deg > first.soft_upper_deg
        )
        first_deg = np.clip(
            goal.first_deg, first.soft_lower_deg + room_deg, first.soft_upper_deg - room_deg
        )
        first_deg = np.where(is_beyond, first_deg, goal.first_deg)
        second_deg = np.clip(goal.second_deg, second.soft_lower_deg, second.soft_upper_deg)
        return joint_errors_deg(first_deg, second_deg, self.motions) * (1.0 + 1e-6)

    def _passable(self, level_deg: FloatArray) -> list[Polygon] | None:
        limits = self.mount.first
        half_deg = half_widths_deg(level_deg, self.motions, self.branch, self.mount.second)
        middle_deg = self.motions.first_deg + 180.0 * self.branch
        lower_deg, upper_deg = walls(middle_deg, half_deg, limits)
        if (half_deg < 0.0).any() or (lower_deg > upper_deg).any():
            return None
        states = passable_states(lower_deg.tolist(), upper_deg.tolist(), limits, self.step_s)
        if states is None or self.start is None or contains(states[0], self.start):
            return states
        return None

    def _goals(self) -> list[State]:
        first_deg = self.motions.first_deg + 180.0 * self.branch
        return list(zip(first_deg.tolist(), self.motions.first_rate_deg_s.tolist(), strict=True))


def stride_for(count: int) -> int:
    """Every how many samples a window of `count` is stepped through."""
    return max(1, ceil(count / MOST_STEPS))


def bisected(
    is_enough: Callable[[float], bool],
    low: float,
    high: float,
    guess: float = 1.0,
    share: float = LEVEL_SHARE,
) -> float:
    """About the least value that is enough, to a share of it; `high` is taken to be enough.

    It is looked for from `guess` on.
    """
    guess = max(2.0 * low, guess)
    while guess < high and not is_enough(guess):
        low, guess = guess, 2.0 * guess
    high = min(guess, high)
    while high - low > max(share * high, LEVEL_DEG):
        tried = 0.5 * (low + high)
        if is_enough(tried):
            high = tried
        else:
            low = tried
    return high


def nearest_state(polygon: Polygon, goal: State) -> State:
    """The goal where it is inside, else a state that is."""
    if contains(polygon, goal):
        return goal
    share = 1.0 / len(polygon)
    return sum(x for x, _ in polygon) * share, sum(y for _, y in polygon) * share

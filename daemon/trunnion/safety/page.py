"""The policy in words: a table for whoever sets up a station, a page for whoever is on duty."""

from collections.abc import Iterator, Mapping

from trunnion.safety.policy import POLICY, Policy
from trunnion.safety.verdict import Action, Rule

COLUMNS = ("hazard", "what is done", "after [s]", "calm for [s]", "ends")

_DOES = {
    Action.SLOW: "slow down",
    Action.STOW: "go to stow",
    Action.HALT: "halt",
    Action.LATCH: "stop for good",
}

_HEADINGS = {
    Action.LATCH: "Stopped for good: somebody has to look, and to reset the stop",
    Action.HALT: "Halted",
    Action.STOW: "Sent to stow",
    Action.SLOW: "Slowed down",
}

CAUTION = (
    "A stop by this program is no substitute for a hard-wired emergency stop. Before anybody goes "
    "near the mount, switch it off at the mount and lock it off."
)


def rows(policy: Mapping[Rule, Policy] = POLICY) -> Iterator[tuple[str, ...]]:
    """The table, worst action first: one row a hazard, under `COLUMNS`."""
    for rule, row in sorted(policy.items(), key=lambda item: -item[1].action):
        times = f"{row.after_s:g}", f"{row.calm_s:g}"
        yield (rule.value, _DOES[row.action], *times, row.clears.value)


def operators_page(policy: Mapping[Rule, Policy] = POLICY) -> str:
    """What each stop means and what to do, in plain words (Markdown)."""
    parts = ["# What the antenna's safety gate says, and what to do", CAUTION]
    for action in sorted(_HEADINGS, reverse=True):
        parts.append(f"## {_HEADINGS[action]}")
        parts += (_entry(rule, row) for rule, row in policy.items() if row.action is action)
    return "\n\n".join(parts) + "\n"


def _entry(rule: Rule, row: Policy) -> str:
    lasts = f" once it has lasted {row.after_s:g} s," if row.after_s else ""
    calm = f" and {row.calm_s:g} s of calm" if row.calm_s else ""
    return (
        f"**{rule.value}.** {row.meaning} The program acts{lasts} {row.until}{calm}. "
        f"*What to do:* {row.remedy}"
    )

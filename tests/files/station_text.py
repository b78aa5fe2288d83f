"""The least station file that is right, for tests to break."""

from pathlib import Path

RIGHT = """\
site:
  name: Ternholm
  latitude_deg: -42.137
  longitude_deg: 146.52
  height_m: 812
mount:
  first:
    travel_deg: [-270, 270]
    rate_deg_s: 6
    acceleration_deg_s2: 3
  second:
    travel_deg: [0, 90]
    rate_deg_s: 4
    acceleration_deg_s2: 3
  stow_deg: [0, 88]
antenna:
  half_power_beamwidth_deg: 3.2
safety:
  elevation_floor_deg: 5
driver:
  kind: simulator
"""


def written(folder: Path, text: str = RIGHT) -> Path:
    file = folder / "station.yaml"
    file.write_text(text, encoding="utf-8")
    return file


def changed(**lines: str) -> str:
    """The right text with the line of each key replaced (an empty one removes it)."""
    text = RIGHT
    for key, line in lines.items():
        before = next(old for old in text.splitlines() if old.strip().startswith(f"{key}:"))
        indent = before[: len(before) - len(before.lstrip())]
        text = text.replace(before + "\n", f"{indent}{line}\n" if line else "", 1)
    return text

"""Take the gate's checks out one at a time, and see that a test misses each.

The checks are found in the source: a new one needs no entry anywhere.
"""

import ast
import os
import sys
from collections.abc import Callable, Iterator
from importlib import import_module
from pathlib import Path
from typing import NamedTuple, TypeGuard

import pytest

from tests.safety.mutation import ROOM, Changed

TESTS = Path(__file__).parent
PATIENCE_S = 20

FINDINGS = frozenset({"Hazard", "Examined"})
"""What a function returns that can say what is wrong."""

QUICK = (
    "gate",
    "places",
    "sunshine",
    "orders",
    "obedience",
    "belief",
    "surroundings",
    "narrow",
    "guarantees",
    "emergency",
    "rest",
    "stillness",
    "clock_watch",
    "transmit",
    "way_in",
    "lasting",
)


class Removal(NamedTuple):
    """One check: in which module, and the how-many-th node of its tree is taken out."""

    module: str
    place: int
    line: int
    source: str

    @property
    def name(self) -> str:
        """The check, told by its first line."""
        return f"{self.module}: {self.source}"


def removals() -> list[Removal]:
    """Every check of the room."""
    return [each for path in sorted(ROOM.glob("[a-z]*.py")) for each in _removals_of(path)]


def _removals_of(path: Path) -> Iterator[Removal]:
    source = path.read_text()
    tree = ast.parse(source)
    places = {id(node): place for place, node in enumerate(ast.walk(tree))}
    for function in ast.walk(tree):
        if isinstance(function, ast.FunctionDef) and _tells_hazards(function):
            for node in ast.walk(function):
                if _is_check(node):
                    text = source.splitlines()[node.lineno - 1].strip()
                    yield Removal(path.stem, places[id(node)], node.lineno, text)


def _tells_hazards(function: ast.FunctionDef) -> bool:
    names = ast.walk(function.returns) if function.returns is not None else ()
    return any(isinstance(name, ast.Name) and name.id in FINDINGS for name in names)


def _is_check(node: ast.AST) -> TypeGuard[ast.stmt]:
    if isinstance(node, ast.Expr):
        return isinstance(node.value, ast.Yield | ast.YieldFrom)
    return isinstance(node, ast.If) and any(map(_returns_something, node.body))


def _returns_something(node: ast.stmt) -> bool:
    if not isinstance(node, ast.Return) or node.value is None:
        return False
    is_none = isinstance(node.value, ast.Constant) and node.value.value is None
    is_empty = isinstance(node.value, ast.Tuple) and not node.value.elts
    return not is_none and not is_empty


class _Without(ast.NodeTransformer):
    """Leaves out one statement; what stood under its `else` stays."""

    def __init__(self, check: ast.AST) -> None:
        self._check = check

    def visit(self, node: ast.AST) -> ast.AST | list[ast.stmt]:
        if node is not self._check:
            return self.generic_visit(node)
        assert isinstance(node, ast.stmt)
        rest = node.orelse if isinstance(node, ast.If) else []
        # A generator has to stay one, even where this was its only yield.
        never = ast.parse("if False:\n    yield").body if isinstance(node, ast.Expr) else []
        return [*rest, *never] or [ast.copy_location(ast.Pass(), node)]


def without(removal: Removal) -> ast.Module:
    """The module's tree with this check taken out."""
    tree = ast.parse((ROOM / f"{removal.module}.py").read_text())
    check = list(ast.walk(tree))[removal.place]
    changed = _Without(check).visit(tree)
    assert isinstance(changed, ast.Module)
    return ast.fix_missing_locations(changed)


def is_missed(removal: Removal) -> bool:
    """Whether a test fails without this check; run in a process of its own."""
    return _fails(without(removal), removal.module)


def fails_whole(module: str) -> bool:
    """Whether a test fails with every check in its place; run in a process of its own."""
    return _fails(ast.parse((ROOM / f"{module}.py").read_text()), module)


def _fails(tree: ast.Module, module: str) -> bool:
    """Whether a scene or a quick test fails with this tree for a module; spoils the process."""
    for name in [each for each in sys.modules if each.startswith("trunnion.safety")]:
        del sys.modules[name]
    for name in [each for each in sys.modules if each.startswith("tests.safety.test_")]:
        del sys.modules[name]
    sys.modules.pop("tests.safety.bench_mount", None)
    sys.meta_path.insert(0, Changed(f"trunnion.safety.{module}", tree))
    return _scene_fails() or _test_fails(module)


def _scene_fails() -> bool:
    """Play the scenes of the policy's rows without pytest: it would take longer to start."""
    try:
        rows = import_module("tests.safety.test_rows")
        play: Callable[..., None] = rows.test_the_row_acts_as_it_says
        for rule in rows.Rule:
            play(rule)
    except Exception:  # noqa: BLE001 - whatever goes wrong, the check was missed
        return True
    return False


def _test_fails(module: str) -> bool:
    quiet = os.open(os.devnull, os.O_WRONLY)
    os.dup2(quiet, 1)
    os.dup2(quiet, 2)
    quick = sorted(QUICK, key=lambda name: name != module)
    files = [str(TESTS / f"test_{name}.py") for name in quick]
    options = ["-x", "-q", "-p", "no:cacheprovider", f"--timeout={PATIENCE_S}"]
    warmed = ["-W", "ignore::pytest.PytestAssertRewriteWarning"]
    return pytest.main([*options, *warmed, *files]) != pytest.ExitCode.OK

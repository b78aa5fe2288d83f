"""Change the gate's comparisons and numbers one at a time, and see that a test fails each time.

    python -m tests.safety.mutation [MODULE …]

A tool, not a test: it takes minutes. It prints every change that no test noticed; those that change
nothing that can be seen are listed in `EQUIVALENT`, each with its reason.
"""

import ast
import os
import sys
from collections import Counter
from collections.abc import Iterator, MutableSequence, Sequence
from copy import deepcopy
from functools import partial
from importlib.abc import Loader, MetaPathFinder
from importlib.machinery import ModuleSpec
from importlib.util import spec_from_loader
from multiprocessing import get_context
from pathlib import Path
from types import ModuleType
from typing import NamedTuple

import hypothesis.strategies  # noqa: F401 - imported once, before the processes fork
import pytest

from tests.safety.equivalent import EQUIVALENT

ROOM = Path(__file__).parents[2] / "daemon" / "trunnion" / "safety"
TESTS = Path(__file__).parent
PATIENCE_S = 60

LEFT_OUT = ("test_checks_removed.py", "test_equivalent.py")
"""Tests of this and the like: they see the source, not the changed module."""

SWAPS: dict[type[ast.cmpop], type[ast.cmpop]] = {
    ast.Lt: ast.LtE,
    ast.LtE: ast.Lt,
    ast.Gt: ast.GtE,
    ast.GtE: ast.Gt,
    ast.Eq: ast.NotEq,
    ast.NotEq: ast.Eq,
    ast.Is: ast.IsNot,
    ast.IsNot: ast.Is,
    ast.In: ast.NotIn,
    ast.NotIn: ast.In,
}
OPPOSITES: dict[type[ast.cmpop], type[ast.cmpop]] = {
    ast.Lt: ast.GtE,
    ast.LtE: ast.Gt,
    ast.Gt: ast.LtE,
    ast.GtE: ast.Lt,
}


class Mutant(NamedTuple):
    """One change: in which module, the how-many-th node of its tree, what becomes of it."""

    module: str
    place: int
    line: int
    change: str

    @property
    def name(self) -> str:
        """The change, told by the line itself: numbers of lines move too easily."""
        source = (ROOM / f"{self.module}.py").read_text().splitlines()[self.line - 1].strip()
        return f"{self.module}: {source}: {self.change}"


def mutants_of(module: str) -> Iterator[Mutant]:
    """Every change to one module."""
    tree = ast.parse((ROOM / f"{module}.py").read_text())
    for place, node in enumerate(ast.walk(tree)):
        for change in _changes(node):
            yield Mutant(module, place, getattr(node, "lineno", 0), change)


def _changes(node: ast.AST) -> Iterator[str]:
    if isinstance(node, ast.Compare):
        for number, operator in enumerate(node.ops):
            for table in (SWAPS, OPPOSITES):
                if type(operator) in table:
                    yield f"{number} {type(operator).__name__} {table[type(operator)].__name__}"
    elif isinstance(node, ast.Constant) and type(node.value) in (int, float):
        yield "greater"
        yield "less"


def mutated(mutant: Mutant) -> ast.Module:
    """The module's tree with this change made."""
    tree = deepcopy(ast.parse((ROOM / f"{mutant.module}.py").read_text()))
    node = list(ast.walk(tree))[mutant.place]
    if isinstance(node, ast.Compare):
        number, _, operator = mutant.change.split()
        node.ops[int(number)] = getattr(ast, operator)()
    elif isinstance(node, ast.Constant) and isinstance(node.value, int | float):
        step = max(1, abs(node.value) // 2) if isinstance(node.value, int) else 0.3 * node.value
        step = step or 0.7
        node.value += step if mutant.change == "greater" else -step
    return ast.fix_missing_locations(tree)


class Changed(MetaPathFinder, Loader):
    """Imports one module from a changed tree."""

    def __init__(self, name: str, tree: ast.Module) -> None:
        self._name = name
        self._tree = tree

    def find_spec(
        self, fullname: str, path: Sequence[str] | None, target: ModuleType | None = None
    ) -> ModuleSpec | None:
        return spec_from_loader(fullname, self) if fullname == self._name else None

    def exec_module(self, module: ModuleType) -> None:
        exec(compile(self._tree, self._name, "exec"), module.__dict__)


class _Sooner:
    """Orders the tests: recent killers, then those of the changed module, then the rest."""

    def __init__(self, module: str, killers: Sequence[str]) -> None:
        self._file = f"test_{module}.py"
        self._killers = killers
        self.killer: str | None = None

    def pytest_collection_modifyitems(self, items: list[pytest.Item]) -> None:
        items.sort(key=self._turn)

    def pytest_runtest_logreport(self, report: pytest.TestReport) -> None:
        if report.failed:
            self.killer = report.nodeid

    def _turn(self, item: pytest.Item) -> tuple[bool, int, bool]:
        is_killer = item.nodeid in self._killers
        last = max((at for at, each in enumerate(self._killers) if each == item.nodeid), default=0)
        return not is_killer, -last, item.path.name != self._file


def survives(mutant: Mutant, killers: MutableSequence[str]) -> bool:
    """Whether all tests pass with this change; run in a process of its own."""
    sys.meta_path.insert(0, Changed(f"trunnion.safety.{mutant.module}", mutated(mutant)))
    quiet = os.open(os.devnull, os.O_WRONLY)
    os.dup2(quiet, 1)
    os.dup2(quiet, 2)
    options = ["-x", "-q", "-p", "no:cacheprovider", f"--timeout={PATIENCE_S}"]
    left_out = [f"--ignore={TESTS / name}" for name in LEFT_OUT]
    warmed = ["-W", "ignore::pytest.PytestAssertRewriteWarning"]
    sooner = _Sooner(mutant.module, list(killers))
    outcome = pytest.main([*options, *left_out, *warmed, str(TESTS)], [sooner])
    if sooner.killer is not None:
        killers.append(sooner.killer)
    return outcome == pytest.ExitCode.OK


def main(modules: Sequence[str]) -> int:
    """Try every mutant; the number of those that nobody noticed and nobody has explained."""
    known = sorted(path.stem for path in ROOM.glob("[a-z]*.py"))
    mutants = [mutant for module in modules or known for mutant in mutants_of(module)]
    survivors: Counter[str] = Counter()
    unexplained: Counter[str] = Counter()
    context = get_context("fork")
    with context.Manager() as manager:
        attempt = partial(survives, killers=manager.list())
        with context.Pool(os.cpu_count(), maxtasksperchild=1) as pool:
            for mutant, has_survived in zip(mutants, pool.imap(attempt, mutants), strict=True):
                survivors[mutant.module] += has_survived
                if has_survived and mutant.name not in EQUIVALENT:
                    unexplained[mutant.module] += 1
                    print(f"{mutant.module}.py:{mutant.line}  {mutant.name}", flush=True)
    for module, tried in Counter(mutant.module for mutant in mutants).items():
        print(
            f"{module}: {tried} changes, {tried - survivors[module]} noticed, "
            f"{survivors[module] - unexplained[module]} explained, {unexplained[module]} neither"
        )
    return unexplained.total()


if __name__ == "__main__":
    sys.exit(bool(main(sys.argv[1:])))

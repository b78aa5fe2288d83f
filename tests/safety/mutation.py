"""Change the gate's comparisons and numbers one at a time, and see that a test fails each time.

    python -m tests.safety.mutation [MODULE …]

A tool, not a test: it takes minutes. It prints every change that no test noticed; those that change
nothing that can be seen are listed in `EQUIVALENT`, each with its reason.
"""

import ast
import os
import sys
from collections.abc import Iterator, Sequence
from copy import deepcopy
from importlib.abc import Loader, MetaPathFinder
from importlib.machinery import ModuleSpec
from importlib.util import spec_from_loader
from multiprocessing import get_context
from pathlib import Path
from types import ModuleType
from typing import NamedTuple

import pytest

from tests.safety.equivalent import EQUIVALENT

ROOM = Path(__file__).parents[2] / "daemon" / "trunnion" / "safety"
TESTS = Path(__file__).parent
PATIENCE_S = 60

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
                    yield f"{number} {table[type(operator)].__name__}"
    elif isinstance(node, ast.Constant) and type(node.value) in (int, float):
        yield "greater"
        yield "less"


def mutated(mutant: Mutant) -> ast.Module:
    """The module's tree with this change made."""
    tree = deepcopy(ast.parse((ROOM / f"{mutant.module}.py").read_text()))
    node = list(ast.walk(tree))[mutant.place]
    if isinstance(node, ast.Compare):
        number, operator = mutant.change.split()
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


def survives(mutant: Mutant) -> bool:
    """Whether all tests pass with this change; run in a process of its own."""
    sys.meta_path.insert(0, Changed(f"trunnion.safety.{mutant.module}", mutated(mutant)))
    quiet = os.open(os.devnull, os.O_WRONLY)
    os.dup2(quiet, 1)
    os.dup2(quiet, 2)
    options = ["-x", "-q", "-p", "no:cacheprovider", f"--timeout={PATIENCE_S}"]
    return pytest.main([*options, str(TESTS)]) == pytest.ExitCode.OK


def main(modules: Sequence[str]) -> int:
    """Try every mutant; the number of those that nobody noticed and nobody has explained."""
    known = sorted(path.stem for path in ROOM.glob("[a-z]*.py"))
    mutants = [mutant for module in modules or known for mutant in mutants_of(module)]
    unexplained = 0
    with get_context("fork").Pool(os.cpu_count(), maxtasksperchild=1) as pool:
        for mutant, has_survived in zip(mutants, pool.imap(survives, mutants), strict=True):
            if has_survived and mutant.name not in EQUIVALENT:
                unexplained += 1
                print(f"{mutant.module}.py:{mutant.line}  {mutant.name}", flush=True)
    print(f"{len(mutants)} changes, {unexplained} that no test noticed")
    return unexplained


if __name__ == "__main__":
    sys.exit(bool(main(sys.argv[1:])))

"""The shape of the code: one direction of imports, few of them on the way to a lookup."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import pytest

import registry

PACKAGE = Path(registry.__file__).parent
MODULES = sorted(
    path.relative_to(PACKAGE).with_suffix("").as_posix().replace("/", ".").removesuffix(".__init__")
    for path in PACKAGE.rglob("*.py")
    if "_shipped" not in path.parts
)

LAYERS = (
    # what stands lower never imports what stands higher; within a layer, modules may import each other
    {"refusals", "numerals", "rules", "canonical", "merkle", "naming", "polynomial", "atomic_weights", "sampling"},
    {"moments"},
    {"errors"},
    {"quantities", "properties", "cells", "scales", "shelves"},
    {"display"},
    {"uncertainty", "forms", "masses"},
    {"readings"},
    {"records"},
    {"curve", "dossier"},
    {"rounding", "restating"},
    {"admission"},
    {"confirmation"},
    {"limits"},
    {"candidate"},
    {"ranking", "evaluation", "deviation", "budget"},
    {"coverage"},
    {"comparison"},
    {"verdicts"},
    {"values", "scale_effects"},
    {"answers", "estimates"},
    {"conditions", "extrapolation", "tolerance"},
    {"choices"},
    {"batches"},
    {"answering"},
    {"inverse", "equilibrium"},
    {"tables", "grounds"},
    {"reports"},
    {"store", "exchange"},
    {"entries", "plan"},
    {"findings"},
    {"derivation", "regrowth"},
    {"inspection"},
    {"verification"},
    {"holdings"},
    {"judgement", "waiting", "chronicle"},
    {"difference"},
    {"recording", "reconciliation", "arrival", "editions", "departure"},
    {"collection"},
    {"reader"},
    {"tabulator"},
    {"archive"},
    {"signature"},
    {"library"},
    {"opening"},
    {"cli"},
)
NUMERIC = {
    "curve", "dossier", "confirmation", "limits", "candidate", "ranking", "evaluation", "coverage", "comparison",
    "deviation", "sampling", "verdicts", "answers", "forms", "scales", "quantities", "records", "uncertainty",
    "readings", "rounding", "budget", "values", "scale_effects", "estimates", "conditions", "extrapolation",
    "tolerance", "batches", "choices", "answering", "restating", "inverse", "equilibrium", "tables", "grounds",
    "reports",
}  # fmt: skip
OWNERS = {
    "sqlalchemy": {"store"},
    "alembic": {"store"},
    "typer": {"cli"},
    "rich": {"cli"},
    "click": {"cli"},
    "xlsxwriter": {"reports"},
}


def _top(module: str) -> str:
    return module.split(".")[0]


def _imports(module: str) -> set[str]:
    """Every import of a module, local and type-only ones too, as dotted names."""
    path = PACKAGE / Path(*module.split("."))
    path = path / "__init__.py" if path.is_dir() else path.with_suffix(".py")
    found: set[str] = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            found |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{module} has a relative import"
            found.add(node.module)
            if node.module == "registry" or node.module.startswith("registry."):
                found |= {f"{node.module}.{alias.name}" for alias in node.names}
    return found


def _own_imports(module: str) -> set[str]:
    known = set(MODULES)
    names = {name.removeprefix("registry.") for name in _imports(module) if name.startswith("registry.")}
    return {name for name in names if name in known}


def _layer(module: str) -> int:
    return next(i for i, layer in enumerate(LAYERS) if _top(module) in layer)


@pytest.mark.parametrize("module", [m for m in MODULES if m not in (".", "__init__")])
def test_imports_go_one_way(module):
    """A module imports only what stands in its own layer or below, counting local and type-only imports."""
    for imported in _own_imports(module):
        assert _layer(imported) <= _layer(module), f"{module} imports {imported}"


@pytest.mark.parametrize("module", MODULES)
def test_outside_libraries_have_one_home(module):
    """Only store/ speaks to the database and only cli/ to the terminal."""
    for name in _imports(module):
        home = OWNERS.get(_top(name))
        assert home is None or _top(module) in home, f"{module} imports {name}"


def test_store_and_numeric_side_never_meet():
    """store/ imports nothing numeric, and nothing numeric imports store/."""
    for module in MODULES:
        tops = {_top(name) for name in _own_imports(module)}
        if _top(module) == "store":
            assert not tops & NUMERIC, module
        if _top(module) in NUMERIC:
            assert "store" not in tops, module


def test_modules_are_small_and_named_for_a_noun():
    """No module over 350 lines, a median below 150, and none called for leftovers."""
    lengths = {m: len(_path(m).read_text(encoding="utf-8").splitlines()) for m in MODULES}
    assert max(lengths.values()) <= 350, {m: n for m, n in lengths.items() if n > 350}
    assert sorted(lengths.values())[len(lengths) // 2] < 150
    for word in ("util", "helper", "common", "base", "manager", "misc"):
        assert not [m for m in MODULES if word in m.split(".")[-1].split("_")]


def _path(module: str) -> Path:
    path = PACKAGE / Path(*module.split("."))
    return path / "__init__.py" if path.is_dir() else path.with_suffix(".py")


LOOKUP = """
import contextlib, io, sys
from registry.cli.entry import main
sys.argv = ["rangebook", "lookup", "water", "25C", "--library", sys.argv[1]]
with contextlib.suppress(SystemExit), contextlib.redirect_stdout(io.StringIO()) as out:
    main()
assert "kPa" in out.getvalue()
print(*sorted({name.split(".")[0] for name in sys.modules}))
"""


def test_a_lookup_imports_only_what_it_needs(published_path):
    """`rangebook lookup` loads no migration code, no ORM, no science or plotting library, no formula table."""
    done = subprocess.run(
        [sys.executable, "-c", LOOKUP, str(published_path)], capture_output=True, text=True, check=True, timeout=60
    )
    loaded = set(done.stdout.split())
    unwanted = {"alembic", "scipy", "matplotlib", "pandas", "molmass", "mpmath", "frictionless", "pydantic"}
    assert {"sqlalchemy", "numpy", "typer"} <= loaded
    assert not loaded & unwanted


@pytest.mark.parametrize("module", ["forms.catalogue", "coverage", "answers", "scales"])
def test_a_numeric_module_loads_no_database_code(module):
    """Importing a numeric module loads neither SQLAlchemy nor the terminal library."""
    code = f"import sys, registry.{module}; assert not {{'sqlalchemy', 'typer', 'sqlite3'}} & set(sys.modules)"
    subprocess.run([sys.executable, "-c", code], check=True, timeout=60)


def test_public_names_resolve_and_are_documented():
    """Every public name of the package resolves, has a docstring, and nothing else is promised."""
    assert sorted(registry.__all__) == registry.__all__
    for name in registry.__all__:
        assert getattr(registry, name).__doc__
    with pytest.raises(AttributeError, match="no attribute 'nothing'"):
        _ = registry.nothing

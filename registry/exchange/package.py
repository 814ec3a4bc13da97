"""The files of a package on disk: a folder, or a zip of one.

Nothing outside the package is read, and nothing larger than the limits is
unpacked.
"""

from __future__ import annotations

import json
import lzma
import os
import shutil
import tempfile
import zipfile
import zlib
from collections.abc import Mapping
from pathlib import Path, PurePosixPath
from typing import Any

from registry.errors import BadInput, CellProblem, InvalidPackage, quote
from registry.exchange.layout import FILES

__all__ = ["DESCRIPTOR", "read_descriptor", "read_package", "write_package"]

DESCRIPTOR = "datapackage.json"
LARGEST_FILE = 64 * 2**20
"""Bytes that one file may have, unpacked."""
HIGHEST_RATIO = 200
"""How much a zip entry may shrink; text shrinks less than a tenth as much."""


def read_package(path: Path) -> dict[str, bytes]:
    """The CSV files that a package's descriptor names.

    Parameters
    ----------
    path : Path
        A folder, or a .zip of one.

    Returns
    -------
    dict of str to bytes
        File name to content, only files of the layout.

    Raises
    ------
    InvalidPackage
        If it is no package, names a file outside itself, or unpacks to more
        than the limits.
    """
    with _open(path) as source:
        names = _resource_paths(path, source.read(DESCRIPTOR))
        return {name: source.read(name) for name in names}


def read_descriptor(path: Path) -> dict[str, Any]:
    """What a package's descriptor says.

    Raises
    ------
    InvalidPackage
        If it is no package.
    """
    with _open(path) as source:
        described: dict[str, Any] = _parse_descriptor(path, source.read(DESCRIPTOR))
        return described


def _open(path: Path) -> _Folder | _Zip:
    _refuse_nul(path)
    if not path.exists():
        raise BadInput(f"There is nothing at {path}. Give a folder or a .zip with {DESCRIPTOR}.")
    try:
        return _Folder(path) if path.is_dir() else _Zip(path)
    except (zipfile.BadZipFile, NotImplementedError, UnicodeDecodeError) as error:
        raise _fault(
            path,
            path.name,
            f"it is no folder and no zip that can be read ({error}). Give the folder that holds {DESCRIPTOR}.",
        ) from None


def _refuse_nul(path: Path) -> None:
    if "\x00" in str(path):
        raise BadInput(f"{quote(path)} is no name of a package: it holds a NUL character.")


def _fault(package: Path, file: str, why: str) -> InvalidPackage:
    return InvalidPackage(str(package), [CellProblem(file, 0, "", "", why)])


def _resource_paths(package: Path, raw: bytes) -> list[str]:
    """The resources of a descriptor, checked against the layout."""
    resources = [resource["path"] for resource in _parse_descriptor(package, raw)["resources"]]
    problems = [problem for entry in resources if (problem := _path_problem(entry))]
    if not problems:
        problems += [f"resource {quote(n)} is named twice." for n in dict.fromkeys(resources) if resources.count(n) > 1]
    if not resources:
        problems.append(f"it names no file; the files are {', '.join(FILES)}.")
    if problems:
        raise InvalidPackage(str(package), [CellProblem(DESCRIPTOR, 0, "", "", why) for why in problems])
    return [name for name in FILES if name in resources]


def _parse_descriptor(package: Path, raw: bytes) -> Any:
    """A descriptor: an object whose resources have a path."""
    try:
        described: Any = json.loads(raw.decode("utf-8-sig"))
        _ = [resource["path"] for resource in described["resources"]]
    except (ValueError, KeyError, TypeError, RecursionError):
        why = "it must be JSON in UTF-8 with a list of resources that have a path."
        raise _fault(package, DESCRIPTOR, why) from None
    return described


def _path_problem(entry: Any) -> str:
    if not isinstance(entry, str):
        return f"a resource path must be one text, not {quote(entry)}."
    if not entry:
        return "a resource path is empty."
    parts = PurePosixPath(entry.replace("\\", "/")).parts
    if not parts or ".." in parts or entry.startswith(("/", "~")) or ":" in entry:
        return f"resource {quote(entry)} points outside the package."
    if entry not in FILES:
        return f"resource {quote(entry)} is no file of a library; the files are {', '.join(FILES)}."
    return ""


class _Folder:
    """A package as a folder."""

    def __init__(self, path: Path) -> None:
        self._path = path

    def __enter__(self) -> _Folder:
        return self

    def __exit__(self, *_: object) -> None:
        return None

    def read(self, name: str) -> bytes:
        target = self._path / name
        if target.is_symlink() or not target.resolve().is_relative_to(self._path.resolve()):
            raise _fault(self._path, name, "it is a link that may point outside the package.")
        if not target.is_file():
            raise _fault(self._path, name, "the file is missing.")
        if target.stat().st_size > LARGEST_FILE:
            raise _fault(self._path, name, f"it is larger than {LARGEST_FILE >> 20} MiB.")
        return target.read_bytes()


class _Zip:
    """A package as a zip; its files may lie in one folder inside."""

    def __init__(self, path: Path) -> None:
        self._path = path
        self._zip = zipfile.ZipFile(path)
        infos = self._zip.infolist()
        self._entries = {info.filename: info for info in infos}
        twice = [info.filename for info in infos if info is not self._entries[info.filename]]
        if twice:
            self._zip.close()
            raise _fault(path, path.name, f"entry {quote(twice[0])} is there twice.")
        outside = [n for n in self._entries if ".." in PurePosixPath(n).parts or n.startswith("/") or "\\" in n]
        if outside:
            self._zip.close()
            raise _fault(path, path.name, f"entry {quote(outside[0])} points outside the package.")
        places = [n.removesuffix(DESCRIPTOR) for n in self._entries if PurePosixPath(n).name == DESCRIPTOR]
        self._prefix = min(places, key=len, default="")

    def __enter__(self) -> _Zip:
        return self

    def __exit__(self, *_: object) -> None:
        self._zip.close()

    def read(self, name: str) -> bytes:
        info = self._entries.get(self._prefix + name)
        if info is None:
            raise _fault(self._path, name, "the file is missing.")
        if info.file_size > LARGEST_FILE:
            raise _fault(self._path, name, f"it unpacks to more than {LARGEST_FILE >> 20} MiB.")
        if info.file_size > 10**6 and info.file_size > HIGHEST_RATIO * max(info.compress_size, 1):
            raise _fault(self._path, name, f"it unpacks to more than {HIGHEST_RATIO} times its size.")
        if info.flag_bits & 1:
            raise _fault(self._path, name, "it is encrypted.")
        try:
            with self._zip.open(info) as stream:
                # the header may lie about the size: read one byte more than allowed
                data = stream.read(LARGEST_FILE + 1)
        except (zipfile.BadZipFile, zlib.error, lzma.LZMAError, OSError, NotImplementedError, EOFError) as error:
            raise _fault(self._path, name, f"it cannot be unpacked ({error}); make the zip again.") from None
        if len(data) > LARGEST_FILE:
            raise _fault(self._path, name, f"it unpacks to more than {LARGEST_FILE >> 20} MiB.")
        return data


def write_package(path: Path, files: Mapping[str, bytes]) -> None:
    """Write the files of a package; it appears whole or not at all.

    Parameters
    ----------
    path : Path
        A folder that does not exist yet, or a name ending in .zip.
    files : mapping of str to bytes
        File name to content. The same files give the same bytes.

    Raises
    ------
    BadInput
        If something is there already or cannot be written.
    """
    _refuse_nul(path)
    if path.exists():
        raise BadInput(f"{path} exists already; nothing was written. Give another name, or remove it first.")
    if not path.parent.is_dir():
        raise BadInput(f"There is no folder {path.parent}; nothing was written.")
    try:
        if path.suffix.lower() == ".zip":
            _write_zip(path, files)
        else:
            _write_folder(path, files)
    except OSError as error:
        raise BadInput(f"{path} cannot be written: {error.strerror}. Nothing was written.") from error


def _write_folder(path: Path, files: Mapping[str, bytes]) -> None:
    fresh = Path(tempfile.mkdtemp(prefix=f".{path.name}.", dir=path.parent))
    try:
        for name, data in files.items():
            (fresh / name).write_bytes(data)
        fresh.chmod(0o755)
        fresh.rename(path)
    except BaseException:
        shutil.rmtree(fresh, ignore_errors=True)
        raise


def _write_zip(path: Path, files: Mapping[str, bytes]) -> None:
    handle, name = tempfile.mkstemp(prefix=f".{path.name}.", dir=path.parent)
    fresh = Path(name)
    try:
        with os.fdopen(handle, "wb") as stream, zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as archive:
            for entry, data in files.items():
                info = zipfile.ZipInfo(entry)  # dated 1980: the same files give the same bytes
                info.compress_type = zipfile.ZIP_DEFLATED
                info.external_attr = 0o644 << 16
                archive.writestr(info, data)
        fresh.chmod(0o644)
        fresh.rename(path)
    except BaseException:
        fresh.unlink(missing_ok=True)
        raise

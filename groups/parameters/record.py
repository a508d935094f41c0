"""The source record (TOML) that stands beside every published table."""

import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from importlib.resources import files
from importlib.resources.abc import Traversable
from typing import Literal, cast, get_args

from groups.errors import DataError

PsiForm = Literal["constant", "quadratic", "logarithmic"]


@dataclass(frozen=True, slots=True)
class Source:
    """A publication that a table is taken from."""

    citation: str
    doi: str
    contributes: str


@dataclass(frozen=True, slots=True)
class Correction:
    """A number changed against the transcription, with the second source that shows it."""

    file: str
    key: str
    column: str
    transcribed: str
    corrected: str
    reason: str
    second_source: str


@dataclass(frozen=True, slots=True)
class Difference:
    """A value that differs between published tables and was left as it stands."""

    subject: str
    found: str
    settled: str


@dataclass(frozen=True, slots=True)
class DataFile:
    """One CSV of a table: its name, rows below the header, and checksum."""

    name: str
    rows: int
    sha256: str


@dataclass(frozen=True, slots=True)
class Record:
    """Everything that a table's TOML says."""

    method: str
    title: str
    psi: PsiForm
    combinatorial_exponent: float
    staverman_guggenheim: bool
    completes: str | None
    transcription: str
    temperature_range_K: tuple[float, float]
    temperature_range_source: str
    sources: tuple[Source, ...]
    files: Mapping[str, DataFile]
    corrections: tuple[Correction, ...]
    differences: tuple[Difference, ...]


def tables_folder() -> Traversable:
    """Folder of the table files inside the installed package.

    Returns
    -------
    Traversable
        The folder, readable through importlib.resources.
    """
    return files("groups.parameters") / "tables"


def read_record(method: str) -> Record:
    """Source record of one table.

    Parameters
    ----------
    method : str
        Method identifier; the file is ``tables/<method>.toml``.

    Returns
    -------
    Record
        The record, with every field present and of its type.

    Raises
    ------
    DataError
        If the file is absent, or a field is missing or of the wrong type.
    """
    name = f"{method}.toml"
    try:
        raw = tomllib.loads((tables_folder() / name).read_text(encoding="utf-8"))
    except (OSError, tomllib.TOMLDecodeError) as error:
        raise DataError(f"{name} cannot be read: {error}") from error
    return _record(name, _Fields(name, raw))


class _Fields:
    """Typed reading of one TOML table; says file and key when something is amiss."""

    def __init__(self, file: str, raw: Mapping[str, object]) -> None:
        self._file, self._raw = file, raw

    def text(self, key: str) -> str:
        return cast(str, self._typed(key, str))

    def number(self, key: str) -> float:
        return float(cast(float, self._typed(key, (int, float))))

    def flag(self, key: str) -> bool:
        return cast(bool, self._typed(key, bool))

    def table(self, key: str) -> "_Fields":
        return _Fields(self._file, cast("Mapping[str, object]", self._typed(key, dict)))

    def tables(self, key: str) -> "Sequence[_Fields]":
        items = cast("list[Mapping[str, object]]", self._raw.get(key, []))
        return [_Fields(self._file, item) for item in items]

    def names(self) -> Sequence[str]:
        return list(self._raw)

    def optional_text(self, key: str) -> str | None:
        return self.text(key) if key in self._raw else None

    def _typed(self, key: str, kind: type | tuple[type, ...]) -> object:
        value = self._raw.get(key)
        if not isinstance(value, kind):
            raise DataError(f"{self._file}: '{key}' is missing or of the wrong type.")
        return value


def _record(name: str, fields: _Fields) -> Record:
    psi = fields.text("psi")
    if psi not in get_args(PsiForm):
        raise DataError(f"{name}: psi '{psi}' is none of {get_args(PsiForm)}.")
    temperature = fields.table("temperature_range_K")
    csv_files = fields.table("files")
    return Record(
        method=fields.text("method"),
        title=fields.text("title"),
        psi=cast(PsiForm, psi),
        combinatorial_exponent=fields.number("combinatorial_exponent"),
        staverman_guggenheim=fields.flag("staverman_guggenheim"),
        completes=fields.optional_text("completes"),
        transcription=fields.text("transcription"),
        temperature_range_K=(temperature.number("lower"), temperature.number("upper")),
        temperature_range_source=temperature.text("source"),
        sources=tuple(_source(item) for item in fields.tables("sources")),
        files={key: _data_file(csv_files.table(key)) for key in csv_files.names()},
        corrections=tuple(_correction(item) for item in fields.tables("corrections")),
        differences=tuple(_difference(item) for item in fields.tables("differences")),
    )


def _source(item: _Fields) -> Source:
    return Source(item.text("citation"), item.text("doi"), item.text("contributes"))


def _data_file(item: _Fields) -> DataFile:
    return DataFile(item.text("name"), int(item.number("rows")), item.text("sha256"))


def _correction(item: _Fields) -> Correction:
    return Correction(
        file=item.text("file"),
        key=item.text("key"),
        column=item.text("column"),
        transcribed=item.text("transcribed"),
        corrected=item.text("corrected"),
        reason=item.text("reason"),
        second_source=item.text("second_source"),
    )


def _difference(item: _Fields) -> Difference:
    return Difference(item.text("subject"), item.text("found"), item.text("settled"))

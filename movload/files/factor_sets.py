"""Factor sets by name or from a file of one's own."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Final

from movload.bridge.permanent import REMOVABLE
from movload.bridge.strengths import SENSES
from movload.errors import InputError, MovloadError, UnknownNameError, nearest_name
from movload.files.library import folded, is_file_name
from movload.files.schema.checked import checked
from movload.files.schema.factor_set import FactorSetFile, LevelTable
from movload.files.toml import parsed, read_text, written_key
from movload.rating.factor_sets import PERMITTED, FactorSet, Level
from movload.rating.impact import RULES, SURFACES
from movload.statics.permanent import PERMANENT_CLASSES
from movload.strength.standards import STANDARDS
from movload.traffic.loading import KINDS

if TYPE_CHECKING:
    from collections.abc import Iterable

_FOLDER: Final = Path(__file__).resolve().parent.parent / "data" / "factor_sets"
FRACTURE: Final = "fracture"  # phi of a net section, which no sense of its own has
_POSTING: Final = ("weight x RF", "legal curve", "none")
_BY_SURFACE: Final = "by riding surface"


def factor_set_names() -> list[str]:
    """Return the names of all shipped factor sets, the bridge file's own permitted forces first."""
    return [PERMITTED.name, *sorted(path.stem for path in _FOLDER.glob("*.toml"))]


def read_factor_set(name: str | Path) -> FactorSet:
    """Return a factor set by its shipped name, or from a file of one's own in the same form.

    A name is read without regard to case, spaces and hyphens: "LRFR", "load factor". Anything that ends in .toml or
    holds a path separator is a file.

    Raises
    ------
    UnknownNameError
        No such set; the nearest name is given.
    InputError
        The file cannot be read, or something in it is wrong.
    """
    if is_file_name(name):
        return _from_file(Path(name))
    text = str(name)
    names = {folded(one): one for one in factor_set_names()}
    found = names.get(folded(text))
    if found is None:
        raise UnknownNameError(
            f'factor set "{text}" is not known and is no .toml file; known: {", ".join(names.values())}',
            nearest=nearest_name(text, names.values()),
        )
    if found == PERMITTED.name:
        return PERMITTED
    return factor_set_from(read_text(_FOLDER / f"{found}.toml"), f"factor_sets/{found}.toml", name=found)


def _from_file(path: Path) -> FactorSet:
    """Return the set in a file; a file that is not there may be meant for a shipped one."""
    try:
        text = read_text(path)
    except UnknownNameError as error:
        shipped = [one for one in factor_set_names() if folded(one) == folded(path.stem)]
        near = next(iter(shipped), error.nearest) or nearest_name(path.stem, factor_set_names())
        raise UnknownNameError(error.rule, place=error.place, nearest=near) from None
    return factor_set_from(text, str(path))


def factor_set_from(text: str, place: str, *, name: str = "") -> FactorSet:
    """Return the factor set in a file's text; ``place`` is what errors call the file, ``name`` what it is asked for by.

    Raises
    ------
    InputError
        Something in it is wrong: file, place, rule, value and nearest name are given.
    """
    try:
        table, _ = checked(FactorSetFile, parsed(text), own_units=False)
        _check(table)
        return _factor_set(table, name or place)
    except MovloadError as error:
        raise error.at(place) from None


def _factor_set(table: FactorSetFile, name: str) -> FactorSet:
    """Return the set that a checked table describes."""
    return FactorSet(
        table.title,
        tuple(_level(level) for level in table.levels),
        table.statement,
        table.edition,
        name=name,
        strengths=("reduced", "nominal"),
        rules=table.rules or "",
        multiple_presence=tuple(table.multiple_presence),
        presence_by_kind={kind: tuple(factors) for kind, factors in table.presence_by_kind.items()},
        condition=dict(table.condition),
        system=dict(table.system),
        measured_gain=table.measured_gain,
        impact=table.impact or "",
        impact_values=dict(table.impact_values),
        crawl_speed=table.crawl_speed or 0.0,
        crawl_kinds=tuple(table.crawl_kinds),
        closure=table.closure or 0.0,
        sources=dict(table.sources),
    )


def _level(table: LevelTable) -> Level:
    """Return one level."""
    return Level(
        table.title,
        live=table.live if table.live is not None else 1.0,  # by_traffic replaces it then
        by_class=dict(table.permanent),
        by_kind=dict(table.live_by_kind),
        kinds=tuple(table.kinds),
        by_traffic=tuple(table.live_by_traffic),
        resistance=dict(table.resistance),
        timber=dict(table.timber),
        condition_factors=table.condition_factors,
        posting="" if table.posting == "none" else table.posting,
    )


def _check(table: FactorSetFile) -> None:
    """Check what no key can be checked for alone."""
    _known(table.presence_by_kind, KINDS, "presence_by_kind")
    _known(table.impact_values, (*KINDS, *SURFACES), "impact_values")
    _known(table.crawl_kinds, KINDS, "crawl_kinds")
    if table.rules is not None:
        _known([table.rules], STANDARDS, "rules")
    if table.impact is not None:
        _known([table.impact], RULES[1:], "impact")
    if table.impact == _BY_SURFACE:
        _named(table.impact_values, SURFACES, "impact_values")
    if (table.crawl_speed is None) != (not table.crawl_kinds):
        absent = "crawl_speed" if table.crawl_speed is None else "crawl_kinds"
        raise InputError("is missing; crawl_speed and crawl_kinds go together", place=absent)
    if not table.levels:
        raise InputError("a set needs at least one level", place="levels")
    for number, level in enumerate(table.levels):
        place = f"levels[{number}]"
        if level.title in [earlier.title for earlier in table.levels[:number]]:
            raise InputError(f'two levels are called "{level.title}"', place=f"{place}.title")
        _check_level(level, place)
        if level.condition_factors and not (table.condition and table.system):
            absent = "system" if table.condition else "condition"
            raise InputError(f"is missing and needed by {place}.condition_factors", place=absent)


def _check_level(table: LevelTable, place: str) -> None:
    """Check a level's names, and that its live and permanent margins say one thing each."""
    _known(table.kinds, KINDS, f"{place}.kinds")
    _known(table.live_by_kind, table.kinds or KINDS, f"{place}.live_by_kind")
    _known(table.resistance, (*SENSES, FRACTURE), f"{place}.resistance")
    _known(table.timber, SENSES, f"{place}.timber")
    _named(table.resistance, SENSES, f"{place}.resistance")
    _known([table.posting], _POSTING, f"{place}.posting")
    _known(table.permanent, PERMANENT_CLASSES, f"{place}.permanent")
    _named(table.permanent, [name for name in PERMANENT_CLASSES if name != REMOVABLE], f"{place}.permanent")
    for name, (pushing, relieving) in table.permanent.items():
        if relieving > pushing:
            raise InputError(
                f"[pushing, relieving]: relief may not count more than load, got [{pushing:g}, {relieving:g}]",
                place=f"{place}.permanent.{written_key(name)}",
            )
    if table.live is None and not table.live_by_traffic:
        raise InputError("is missing; or live_by_traffic", place=f"{place}.live")
    if table.live is not None and table.live_by_traffic:
        raise InputError("live_by_traffic says it already; keep one", place=f"{place}.live")
    trucks = [one for one, _ in table.live_by_traffic]
    if trucks != sorted(set(trucks)):
        said = ", ".join(f"{one:g}" for one in trucks)
        raise InputError(f"trucks a day must increase, got {said}", place=f"{place}.live_by_traffic")


def _known(names: Iterable[str], known: Iterable[str], place: str) -> None:
    """Refuse a name that is not one of those known."""
    known = tuple(known)
    for name in names:
        if name not in known:
            raise UnknownNameError(
                f'"{name}" is not one of {", ".join(known)}', place=place, nearest=nearest_name(name, known)
            )


def _named(names: Iterable[str], needed: Iterable[str], place: str) -> None:
    """Refuse a table that leaves a name out."""
    given = set(names)
    absent = [name for name in needed if name not in given]
    if absent:
        raise InputError(f"says nothing of {', '.join(absent)}", place=place)

"""The standards whose rules give strengths, by the names that factor sets call them."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

if TYPE_CHECKING:
    from collections.abc import Mapping

TITLES: Final[Mapping[str, str]] = {
    "aashto_lrfd": "AASHTO LRFD",
    "mbe_allowable_stress": "MBE 6B, allowable stress",
    "mbe_load_factor": "MBE 6B, load factor",
    "en_1993": "EN 1993-1-1",
}
STANDARDS: Final = tuple(TITLES)

"""From a part as made to what a level of a method lets it carry: the standard's rules with the level's factors."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import TYPE_CHECKING

from movload.rating.resistance import reduction
from movload.strength.parts import part_strength
from movload.strength.strength import Step, Strength

if TYPE_CHECKING:
    from movload.bridge.made import Made
    from movload.bridge.strengths import TypedStrength
    from movload.rating.factor_sets import FactorSet, Level


def ruled(
    made: Made, typed: TypedStrength, sense: str, by: tuple[FactorSet, Level], *, subject: str
) -> Strength:  # fmt: skip
    """Return what a part as made may carry in one sense at one level, by the rules of the method's standard.

    Every phi of the level goes into the rules times max(phi_c phi_s, 0.85) at a strength limit state, so that it stands
    on each limit state, and on axial force and bending alike where both act.

    Parameters
    ----------
    typed
        What was typed about the part's condition and system.
    by
        The method and its level.
    subject
        What errors call the part.

    Raises
    ------
    MissingDataError, UnknownNameError
        Something that the rule or the level asks for is not there.
    InputError
        The rule does not cover the part.
    """
    method, level = by
    factors = level.timber if made.material.kind == "timber" else level.resistance
    both, said = reduction(typed, sense, method, level, subject)
    asked = _Asked(factors, both)
    strength = part_strength(made, sense, method.rules, asked, subject=subject)
    steps = [Step(f"phi {name}", "the level's factor", factors[name], "-", method.title) for name in asked.names]
    if said:
        steps += said
        steps += [
            Step(f"k phi {name}", "takes the place of phi in what follows", asked[name], "-", method.title)
            for name in asked.names
        ]
    return Strength(
        strength.value, (*steps, *strength.steps), as_new=strength.as_new, permanent=strength.permanent
    )  # fmt: skip


class _Asked(Mapping[str, float]):
    """A level's factors times one number; it keeps the names that a rule asked for."""

    def __init__(self, factors: Mapping[str, float], times: float) -> None:
        self._factors, self._times = factors, times
        self.names: list[str] = []

    def __getitem__(self, name: str) -> float:
        value = self._times * self._factors[name]
        if name not in self.names:
            self.names.append(name)
        return value

    def __iter__(self) -> Iterator[str]:
        return iter(self._factors)

    def __len__(self) -> int:
        return len(self._factors)

    def __contains__(self, name: object) -> bool:
        return name in self._factors

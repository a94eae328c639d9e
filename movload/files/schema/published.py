"""The schemas that are published: of the two files, and of the ratings document that ``--json`` prints."""

from __future__ import annotations

from typing import Any

from pydantic import BaseModel, ConfigDict, Field

from movload.files.schema.bridge import BridgeFile
from movload.files.schema.factor_set import FactorSetFile
from movload.files.schema.vehicle import VehicleFile


class Document(BaseModel):
    """Part of a result document; fields are only ever added within one format number."""

    model_config = ConfigDict(extra="forbid")


class PlacementDocument(Document):
    """The axles as they stand, front axle first; SI."""

    x: list[float]
    load: list[float] = Field(description="whole axle [N]")
    share: list[float] = Field(description="part of a whole axle that reaches the part")
    impact: list[float] = Field(description="dynamic allowance of each axle; its effect counts 1 + impact times")
    factor: list[float] = Field(description="what its case and multiple presence multiply it by")
    z: list[float | None] = Field(
        description="where its vehicle's middle keeps across [m]; null where a share is typed"
    )
    vehicle: list[int] = Field(description="which of the vehicles abreast it belongs to, counted from 1")
    held: list[bool] = Field(description="whether a rating holds it fixed: traffic beside")


class RatingDocument(Document):
    """One rated row under one crossing."""

    crossing: str
    level: str
    part: str
    row: str
    sense: str = Field(description="tension or compression")
    factor: float | None = Field(description="RF; null when there is strength to spare and no live effect")
    strength: float = Field(description="magnitude [N, N m]")
    as_new: float | None = Field(
        description="the same with no metal gone, by the rules; null where it was typed [N, N m]"
    )
    permanent: float = Field(description="permanent effect [N, N m], tension and sagging positive")
    live: float = Field(description="live effect with share and impact [N, N m], tension and sagging positive")
    impact: float
    safe_weight: float | None = Field(
        description="what the vehicle could weigh by the level's rule [N]: factor x weight, or the legal curve"
    )
    position: float | None = Field(description="x of the front axle [m]; null when the vehicle is off the bridge")
    heading: int = Field(description="+1 toward +x, -1 the other way, 0 off the bridge")
    axle: int | None = Field(description="the axle, counted from 1 at the front, that stands on a station")
    station: int | None = Field(description="that station's number, counted from 0")
    permanent_use: float | None = Field(description="part of the strength that permanent load alone uses")
    placement: PlacementDocument | None
    kind: str = Field(description="axial, moment or shear")
    stands_for: str = Field(description="the part as a person says it: either truss where both are alike")
    crossing_number: int = Field(description="number in crossings, counted from 0")
    abreast: int = Field(description="how many vehicles stand side by side; 0 when off the bridge")
    place: str = Field(description="where across the crossing keeps, by name")
    speed: float | None = Field(description="[m/s]; null where none is meant")
    live_factor: float = Field(description="margin on the live effect")
    held: float = Field(description="live effect of traffic beside it that is held fixed, impact included [N, N m]")
    held_factor: float = Field(description="margin on it")
    permanent_used: float = Field(description="what permanent load uses of the strength, margins included [N, N m]")


class CrossingDocument(Document):
    """Who crosses and how."""

    title: str
    kind: str
    weight: float = Field(description="[N]")
    place: str
    source: str
    z: float | None = Field(description="the offset asked for [m]; null where the place has a name")
    speed: float | None = Field(description="[m/s]; null where none is meant")
    most_abreast: int = Field(description="how many stand side by side at most, traffic beside it included")
    beside: str | None = Field(description="ordinary traffic that may stand beside it")


class CoverageDocument(Document):
    """What the answer covers, by member names."""

    full: list[str] = Field(description="rated in every sense they feel")
    partly: list[str]
    none: list[str]
    not_rated: list[str]


class DeflectionDocument(Document):
    """The live deflection of a panel point under a crossing."""

    part: str
    point: str
    crossing: str
    crossing_number: int
    down: float = Field(description="[m], impact included")
    ratio: float | None = Field(description="span / down; null where nothing deflects")
    limit: float | None = Field(description="n of a limit span / n; null where none is asked")


class NoteDocument(Document):
    """What a reader must know."""

    code: str
    subject: str
    text: str
    source: str


class StepDocument(Document):
    """One line of a strength's derivation."""

    symbol: str
    equation: str
    value: float = Field(description="SI")
    unit: str
    source: str


class PermanentTermDocument(Document):
    """One class's part of what permanent load uses of a strength."""

    title: str
    effect: float = Field(description="as it acts, tension and sagging positive [N, N m]")
    margin: float
    used: float = Field(description="in the rated sense, negative where it relieves [N, N m]")


class TermDocument(Document):
    """One axle's part of a live effect: load x factor x share x (1 + impact) x ordinate."""

    vehicle: int
    axle: int
    x: float
    z: float | None
    load: float
    factor: float
    share: float
    impact: float
    ordinate: float
    effect: float
    held: bool


class ExplanationDocument(Document):
    """One rating taken apart."""

    crossing_number: int
    level: str
    part: str
    row: str
    sense: str
    strength: list[StepDocument]
    permanent: list[PermanentTermDocument]
    terms: list[TermDocument]
    spare: float = Field(description="strength less what permanent and held load use [N, N m]")
    live: float = Field(description="magnitude [N, N m]")
    live_factor: float
    held: float = Field(description="magnitude of what is held fixed [N, N m]; spare is less its margin times it")
    held_factor: float
    factor: float | None


class RatingsDocument(Document):
    """The document movload.ratings/1: SI, unrounded; rows worst first by crossing."""

    format: str
    title: str
    method: str
    statement: str
    units: dict[str, str]
    crossings: list[CrossingDocument]
    coverage: CoverageDocument
    notes: list[NoteDocument]
    deflections: list[DeflectionDocument]
    uplifts: dict[str, float] = Field(description="bearings that are pulled up and by how much [N]")
    cautions: list[str]
    sources: list[str]
    rows: list[RatingDocument]
    explanations: list[ExplanationDocument] = Field(description="rows that were asked to be taken apart")


_MODELS: dict[str, type[BaseModel]] = {
    "bridge": BridgeFile, "vehicle": VehicleFile, "ratings": RatingsDocument, "factor_set": FactorSetFile,
}  # fmt: skip


def schema_of(subject: str) -> dict[str, Any]:
    """Return the JSON Schema of "bridge", "vehicle", "factor_set" or "ratings"."""
    return {"$schema": "https://json-schema.org/draft/2020-12/schema", **_MODELS[subject].model_json_schema()}

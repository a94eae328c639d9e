"""What a bridge file may hold about materials, and about what parts are made of and how they are held, key by key."""

from __future__ import annotations

from typing import Annotated, Any, Final, Literal

from pydantic import Field, ValidationInfo

from movload.bridge.material import KINDS
from movload.errors import InputError, nearest_name
from movload.files.schema.metals import Year
from movload.files.schema.quantities import (
    Area,
    Checked,
    Density,
    Fraction,
    Moment,
    Section,
    Stress,
    Table,
    Text,
    known_name,
    number,
    read_by,
    units_in,
)
from movload.files.schema.sections import Counted, Flag, Offset, Size, between, sized

_CLOSEST: Final = 0.01  # m; nothing along a bar stands closer: metres typed where millimetres are asked are caught
_LEAST_K: Final = 0.1  # no bar between its own points of hold has less; 0.0085 typed for 0.85 is caught
Apart = Annotated[Section, between(_CLOSEST, 200.0, "m", "a distance along or across a bar")]
Strong = Annotated[Stress, between(1e6, 1.5e9, "Pa", 'a stress (say its unit: "230 MPa")')]
Weak = Annotated[Stress, between(1e4, 4e7, "Pa", 'a stress (say its unit: "8.5 MPa")')]
Elastic = Annotated[Stress, between(1e8, 1e12, "Pa", 'a modulus (say its unit: "200 GPa")')]
Heavy = Annotated[Density, between(50.0, 25000.0, "kg/m3", "a density")]
Kind = Annotated[Text, Checked(lambda kind: known_name(kind, KINDS))]
Factors = dict[Text, Fraction]


def _least(low: float, unit: str = "") -> Checked:
    """Return the validator of what is above 0 and too small: the domain refuses 0 and less, this the absurd."""

    def check(value: float | str) -> float | str:
        if not isinstance(value, str) and 0 < value < low:
            raise InputError(f"at least {low:g}{unit} is asked for, got {value:g}{unit}")
        return value

    return Checked(check)


K = Annotated[Fraction, _least(_LEAST_K)]


def _free(name: str) -> Any:  # the parts of Annotated
    """Return the annotation's parts for a length that may be said by a name."""

    def read(value: object, info: ValidationInfo) -> float | str:
        if value == name:
            return name
        try:
            return number(value, "length", units_in(info))
        except InputError as error:
            near = nearest_name(value, (name,)) if isinstance(value, str) else ""
            raise InputError(f'{error.rule}; or "{name}"', nearest=near) from None

    return read_by(read, ["number", "string"])


JOINT_TO_JOINT: Final = "joint to joint"
HELD: Final = "held"
FreeOfBar = Annotated[float | str, *_free(JOINT_TO_JOINT), _least(_CLOSEST, " m")]
FreeOfBeam = Annotated[float | str, *_free(HELD), _least(_CLOSEST, " m")]


class StressesTable(Table):
    """A timber's reference values."""

    tension: Weak | None = None
    compression: Weak | None = None
    bending: Weak | None = None
    shear: Weak | None = None
    stability: Elastic | None = Field(None, description="modulus for stability, E_min")


class FactorsTable(Table):
    """What adjusts a timber's reference values, each by the standard's symbol; none counts as 1 unsaid."""

    tension: Factors | None = None
    compression: Factors | None = None
    bending: Factors | None = None
    shear: Factors | None = None
    stability: Factors | None = None


class MaterialTable(Table):
    """A metal by the year built, a metal as typed, or a timber by its reference stresses."""

    kind: Kind = Field(description=", ".join(KINDS))
    built: Year | None = Field(None, description="year built, which gives all else of a steel or a wrought iron")
    fy: Strong | None = Field(None, description="yield stress")
    fu: Strong | None = Field(None, description="ultimate stress")
    modulus: Elastic | None = None
    density: Heavy | None = None
    source: Text | None = Field(None, description="where the values come from")
    product: Text | None = Field(None, description="of a timber: sawn or glued laminated")
    stresses: StressesTable | None = Field(None, description="a timber's reference values")
    factors: FactorsTable | None = Field(None, description="what adjusts them")
    durations: list[Text] | None = Field(None, description='of the loads on a timber, e.g. ["two months"]')
    treated: Flag | None = Field(None, description="whether a timber is treated under pressure")


class LossTable(Table):
    """Metal gone, as measured."""

    where: Text = Field("all along", description="all along, start end, middle or end end")
    piece: Text | None = None
    part: Text | None = None
    amount: Offset | None = Field(None, description="off the part's thickness, both faces together")
    fraction: Fraction | None = Field(None, description="of the part's area as new, instead of an amount")
    inside_connection: Flag = Field(False, description="whether all of it lies within the bolted or riveted length")


class MemberLossTable(LossTable):
    """Metal gone off one bar or all bars of a group, in one truss or in both."""

    truss: Literal["left", "right"] | None = Field(None, description="both when left out")
    bar: Text | None = Field(None, description="all bars of the group when left out")


class JoinedTable(Table):
    """How the parts of a bar that is not solid are held together: by lacing, or by battens or stitches."""

    axis: Text = Field(description="x or y: about which buckling is weakened")
    spacing: Apart = Field(description="between battens or stitches, or the pitch of one lacing bar")
    apart: Apart = Field(description="between the parts' centroids; of lacing, between its lines of fasteners")
    lacing_area: Annotated[Area, sized(2)] | None = Field(None, description="of one lacing bar")
    planes: Counted | None = Field(None, description="lacing bars in one cross-section")
    radius: Size | None = Field(None, description="least radius of one part, between battens or stitches")


class BentTable(Table):
    """What bends a bar beside its axial force, about one axis."""

    axis: Text = Field(description="x in the truss's plane, y out of it")
    moment: Moment = Field(0.0, description="as typed: nothing is put on it")
    eccentricity: Offset = Field(0.0, description="of the axial force off the axis")
    bow: Offset = Field(0.0, description="of the bar's middle off its line")
    evenness: Fraction = Field(1.0, description="Cm; 1 where a load stands between the joints")


class MakeKeys(Table):
    """What a part is made of."""

    section: Text | None = Field(None, description="name of one of the sections")
    material: Text | None = Field(None, description="name of one of the materials")
    curves: list[Text] | None = Field(None, description="buckling curves of EN 1993-1-1 about x and y")


class MemberMake(MakeKeys):
    """What bars are made of and how they are held."""

    unbraced_x: FreeOfBar | None = Field(None, description="in the truss's plane")
    unbraced_y: FreeOfBar | None = Field(None, description="out of it")
    unbraced_z: FreeOfBar | None = Field(None, description="of twist")
    k_x: K | None = Field(None, description="effective length factor K")
    k_y: K | None = None
    k_z: K | None = None
    joined: JoinedTable | None = None
    bent: list[BentTable] | None = None
    losses: list[MemberLossTable] | None = None


class PartMake(MakeKeys):
    """What a part of the floor is made of and how it is held."""

    unbraced: FreeOfBeam | None = Field(
        None, description="length between points where the edge in compression is held, or held: all along"
    )
    c_b: Fraction | None = Field(None, description="for the moment's shape, 1 to 2.3")
    stiffeners: Apart | None = Field(None, description="distance along a web")
    lever: Offset | None = Field(None, description="C2 zg of EN 1993-1-1: load above the shear centre")
    losses: list[LossTable] | None = None

"""What a reduction yields: one frozen record per stage, in metres, tonnes and tangents."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

from incline.record import Method, Point, Statements, Trial
from incline.units import Quantity

__all__ = [
    "FORMAT", "AsInclined", "Budget", "BudgetLine", "Check", "DeviceFit", "Diagnosis",
    "DraftResidual", "Estimate", "Finding", "FreeSurface", "HeelFit", "HeelPoint", "HullEntry",
    "Influence", "Ledger", "LedgerLine", "LeverCurve", "Lightship", "MethodResult", "Outcome",
    "ReducedReading", "Reduction", "Rolling", "ShiftMoment", "Simulated", "Simulation",
    "SlopeUncertainty", "TableEntry", "Unseen", "Waterline",
]  # fmt: skip

FORMAT = 1
"""Of a result written as JSON: raised when a key changes its meaning."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Estimate:
    """A value with its standard uncertainty ``u``, expanded ``U`` = k u, and degrees of freedom.

    ``value`` is None when the quantity could not be found; a remark says why.
    """

    value: float | None
    u: float | None = None
    U: float | None = None
    k: float | None = None
    dof: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class DraftResidual:
    """One draft reading against the fitted waterline [m]; ``studentised`` None without spread."""

    x: float
    side: Literal["P", "S", "C"]
    draft: float
    fitted: float
    residual: float
    studentised: float | None
    flagged: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Waterline:
    """Least-squares waterline through the drafts.

    Drafts at the perpendiculars and amidships [m] above baseline; ``trim`` = aft - forward [m];
    ``tau`` = trim / length between perpendiculars; ``deflection`` [m], positive when amidships is
    deeper (sag); ``list_tan`` positive starboard down. ``deflection`` and ``list_tan`` are None
    when the drafts cannot tell them. ``sd`` is the residual standard deviation [m].
    """

    draft_ap: float
    draft_fp: float
    draft_mid: float
    trim: float
    tau: float
    deflection: float | None
    list_tan: float | None
    residuals: tuple[DraftResidual, ...]
    sd: float | None
    dof: int


@dataclass(frozen=True, slots=True, kw_only=True)
class TableEntry:
    """How the hydrostatic table was entered.

    ``draft`` [m] is the entry draft; ``at_lcf`` when it is the draft at the centre of flotation of
    an even-keel table; ``deflection_factor`` and its basis; ``trim_volume`` [m3] the second trim
    correction; ``linear_km`` [m] is KM by straight-line interpolation between rows.
    """

    draft: float
    at_lcf: bool
    deflection_factor: float
    deflection_basis: str
    trim_volume: float
    linear_km: float
    table_drafts: tuple[float, float]
    table_trims: tuple[float, float]
    less_hull: tuple[float, float, float] | None = None
    """The table less the integration of the trial's offsets, where it has them too: share of
    volume, KM [m], LCB [m]."""


@dataclass(frozen=True, slots=True, kw_only=True)
class HullEntry:
    """How the hull was integrated.

    ``stations``, ``points`` are counts over all bodies. ``freeboard`` [m] is the least height of
    the deck edge above the waterline at any shift. ``by_stations`` and ``by_points`` estimate what
    the spacing of stations and of points may be worth: share of volume, KM [m], LCB [m].
    ``table`` is the trial's own hydrostatic table less the integration, likewise, and None without
    a table that covers the waterline. ``layers`` are depths of the tops of layers [m] with their
    density [t/m3], empty in mixed water; ``overlaps`` names bodies that stand in one another with
    the volume counted twice [m3]. ``surface`` is the largest miss of the response surface that
    uncertainties go through: lightship displacement [t], KG, LCG, TCG, GM [m]; NaN where there is
    no such result.
    """

    stations: int
    points: int
    freeboard: float
    layers: tuple[tuple[float, float], ...]
    by_stations: tuple[float, float, float]
    by_points: tuple[float, float, float]
    table: tuple[float, float, float] | None
    overlaps: tuple[tuple[str, str, float], ...] = ()
    surface: tuple[float, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class AsInclined:
    """The ship as inclined, test weights at their start [m, t, m3]. kmt = kb + bmt.

    ``entry`` says how the table was entered, ``hull`` how the hull was integrated: one of them is
    there. ``density`` is that of the displaced water: the mean of the samples unless the water is
    in layers. KB, BM and KM are those of the upright ship at these drafts, LCB that of the listed
    ship.

    ``vcg`` is solid (free surface taken out). ``lcg`` is None when the table cannot give it for a
    trimmed ship, ``tcg`` when the drafts cannot give the list. Drafts, ``trim`` and ``list_tan``
    are those of the shifts: what came aboard or left since the drafts were read is allowed for.
    """

    waterline: Waterline
    entry: TableEntry | None
    density: float
    volume: float
    displacement: float
    lcb: float | None
    kb: float
    bmt: float
    kmt: float
    vcg: float
    lcg: float | None
    tcg: float | None
    draft_ap: float
    draft_fp: float
    draft_mid: float
    trim: float
    list_tan: float | None
    hull: HullEntry | None = None
    zb: float | None = None
    """Height of B at the listed waterline [m], which LCG goes by; None where it is KB."""


@dataclass(frozen=True, slots=True, kw_only=True)
class ShiftMoment:
    """Moments of the test weights about their start [t m]: transverse (to starboard), vertical."""

    shift: int
    time: str
    transverse: float
    vertical: float


@dataclass(frozen=True, slots=True, kw_only=True)
class ReducedReading:
    """A reading brought to one value (``quantity`` as recorded) with its standard uncertainty."""

    value: float
    u: float | None
    count: int
    how: str


@dataclass(frozen=True, slots=True, kw_only=True)
class HeelPoint:
    """One reading against the line: moment [t m], tangents; ``excluded`` gives the reason."""

    shift: int
    device: str
    moment: float
    tangent: float
    fitted: float
    reading: ReducedReading
    excluded: str

    @property
    def residual(self) -> float:
        """Tangent less fitted tangent."""
        return self.tangent - self.fitted


@dataclass(frozen=True, slots=True, kw_only=True)
class DeviceFit:
    """A device alone, its own line; ``intercept`` is its zero in the common fit [tangent]."""

    id: str
    readings: int
    gm: float
    u_gm: float | None
    slope: float
    u_slope: float | None
    intercept: float
    r_squared: float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class MethodResult:
    """Lightship KG and GM with liquids free [m] by one of the methods."""

    method: Method
    vcg: float
    gm_fluid: float


@dataclass(frozen=True, slots=True, kw_only=True)
class LeverCurve:
    """N(t) = y_B + z_B t [m] over tangents of heel, and what each method puts in its place.

    ``integrated`` is empty without a hull. ``shifts`` are the fitted tangents of the shifts, list
    included, ``balance`` N there by the method used, and ``liquids`` the moments of free liquids
    [t m]; ``start`` is N at the list with the test weights at their start.
    """

    shifts: tuple[float, ...]
    balance: tuple[float, ...]
    liquids: tuple[float, ...]
    start: float
    tangents: tuple[float, ...]
    integrated: tuple[float, ...]
    wall_sided: tuple[float, ...]
    straight_line: tuple[float, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class HeelFit:
    """The common fit through all devices: slope [1/(t m)], GM with liquids free [m].

    By the straight-line method that is a line. By the others it is the curve of the method's lever,
    ``slope`` is that of heel against moment upright, and the statistics are those of the curve
    linearised at the fit. ``others`` are the methods that could also have been used.

    ``residual_sd`` is in tangents. ``max_heel_port`` and ``max_heel_starboard`` [rad, positive]
    are measured from the start, with the list from the drafts added where it is known.
    """

    method: Method
    slope: float
    u_slope: float | None
    gm_fluid: float
    u_gm_fluid: float | None
    dof: int
    residual_sd: float | None
    devices: tuple[DeviceFit, ...]
    points: tuple[HeelPoint, ...]
    shifts: tuple[ShiftMoment, ...]
    max_heel_port: float
    max_heel_starboard: float
    by_offsets: float | None = None
    """KG [m] by this method less that by the heeled hull, both on offsets that the trial has but
    does not use."""
    curvature_kg: float = 0.0
    """What KG may be off by [m] for curvature that the method leaves out: by a straight line
    without a hull, what it is low by on a wall-sided one, half of BM times cov(t, t^3) / var(t) or
    sum(t^4) / sum(t^2) about the upright; with a hull, the difference from the heeled-hull method;
    zero for that method itself."""
    others: tuple[MethodResult, ...] = ()
    levers: LeverCurve | None = None
    pocketing: tuple[str, ...] = ()
    """Box tanks whose surface reaches the bottom or the top at the heels of this test."""


@dataclass(frozen=True, slots=True, kw_only=True)
class FreeSurface:
    """Sum of free-surface moments [t m] and the rise of G they are worth [m]."""

    moment: float
    correction: float


@dataclass(frozen=True, slots=True, kw_only=True)
class LedgerLine:
    """One line of the ledger. ``source``: the table it came from; ``to`` for a relocated item."""

    action: Literal["deduct", "add", "relocate"]
    name: str
    mass: float
    centre: Point
    to: Point | None
    source: Literal["ledger", "test weights", "tanks", "people"]
    stated: Statements = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Ledger:
    """All lines, sums by action [t], and the self-check.

    ``balance`` [t m] is the largest of the three sums of moments about the resulting centre of
    gravity (as-inclined, less deductions, plus additions, plus relocations): zero to rounding.
    """

    lines: tuple[LedgerLine, ...]
    deduct: float
    add: float
    relocate: float
    balance: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Lightship:
    """Lightship displacement [t], VCG (KG), LCG and TCG [m]."""

    displacement: Estimate
    vcg: Estimate
    lcg: Estimate
    tcg: Estimate


@dataclass(frozen=True, slots=True, kw_only=True)
class SlopeUncertainty:
    """Standard uncertainty of the common slope from the scatter of the readings [1/(t m)].

    ``ship``, ``device``, ``reading`` are the standard uncertainties that each part of the scatter
    would give alone; ``lengths_seen`` tells whether disagreement between devices stands for the
    errors of their lengths. ``u`` is None when there is no scatter to go by; ``reason`` says what
    this trial cannot tell.
    """

    u: float | None
    dof: float
    ship: float
    device: float
    reading: float
    lengths_seen: bool
    reason: str


@dataclass(frozen=True, slots=True, kw_only=True)
class BudgetLine:
    """One input's part in one result.

    ``u`` is its standard uncertainty, ``sensitivity`` the result's change per unit of it (both in
    inside units; ``quantity`` None is a slope), ``part`` their product in the result's unit, and
    ``share`` its share of the variance, correlations included.
    """

    name: str
    u: float
    quantity: Quantity | None
    basis: str
    shape: str
    dof: float
    sensitivity: float
    part: float
    share: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Budget:
    """Uncertainty budget of one result, largest share first.

    ``key`` is displacement, vcg, lcg, tcg (of the lightship) or gm_fluid.
    """

    key: str
    estimate: Estimate
    lines: tuple[BudgetLine, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Simulated:
    """One result by Monte Carlo: mean, standard uncertainty, 95 % intervals, and JCGM 101 clause 8.

    ``mean`` and ``u`` are None where scatter with two degrees of freedom or less leaves none.
    ``agrees`` tells whether the first-order interval is validated: both ends within ``tolerance``
    of the simulated probabilistically symmetric ones.
    """

    key: str
    mean: float | None
    u: float | None
    symmetric: tuple[float, float]
    shortest: tuple[float, float]
    tolerance: float
    agrees: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Simulation:
    """A Monte Carlo run through the chain.

    ``settled`` is False when the run stopped at its largest number of draws before its figures
    settled, None when the number was fixed beforehand. ``kg_edges`` and ``kg_counts`` are a
    histogram of KG over all but its outermost thousandth on each side.
    """

    draws: int
    seed: int
    settled: bool | None
    results: tuple[Simulated, ...]
    covariance: tuple[tuple[float | None, ...], ...]
    kg_above_limit: float | None
    kg_edges: tuple[float, ...]
    kg_counts: tuple[int, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Outcome:
    """One pass through the whole chain."""

    as_inclined: AsInclined
    heel: HeelFit
    free_surface: FreeSurface
    ledger: Ledger
    lightship: Lightship
    covariance: tuple[tuple[float | None, ...], ...]
    """4 x 4 over displacement, vcg, lcg, tcg [t, m]."""
    slope_uncertainty: SlopeUncertainty
    budgets: tuple[Budget, ...]
    kg_above_limit: float | None
    """Probability, first order, that lightship KG is above the trial's limit; None without one."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Check:
    """One published criterion held against the trial.

    ``found`` is the measured value in ``unit`` (or in words), None when it was not recorded;
    ``limit`` is printed as it stands in the table of criteria, or as the trial overrides it with a
    reason in ``note``. ``evidence`` says how the limit is known: read, reported or memory.
    """

    id: str
    title: str
    status: Literal["pass", "fail", "not recorded", "not applicable"]
    found: float | str | None
    limit: str
    unit: str
    rule_set: str
    source: str
    edition: str
    evidence: str
    note: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Finding:
    """One disturbance that explains the residuals better than chance does.

    ``score`` is its statistic and ``critical`` the value that a clean trial passes in 5 % of cases;
    ``size`` says how large it is, in words; ``vcg_if_so`` [m] is lightship KG if it is the cause.
    ``rank`` is 0 for the explanation that fits best, 1... for those that fit nearly as well.
    ``expected`` are the tangents that the readings that count would have under it and the findings
    before it, scatter apart, in the order of ``HeelFit.points``; empty where there is no pattern.
    """

    cause: str
    where: Literal["ship", "device"]
    shift: int | None
    device: str | None
    score: float
    critical: float
    size: str
    vcg_if_so: float | None
    advice: str
    rank: int
    expected: tuple[float, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Unseen:
    """The smallest disturbance of one kind that this trial would have shown, and its worth in KG.

    ``size`` [tangent] would be found in nine cases of ten; ``vcg`` [m] is what it does to lightship
    KG; ``excluded_by`` names the trial's own evidence against it, empty when there is none.
    """

    cause: str
    size: float
    vcg: float
    excluded_by: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Influence:
    """Lightship KG [m] without one reading, shift or device, less KG with everything."""

    shift: int | None
    device: str | None
    change: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Diagnosis:
    """What the residuals say: findings, what they could not show, and who matters most."""

    findings: tuple[Finding, ...]
    unseen: tuple[Unseen, ...]
    influence: tuple[Influence, ...]
    critical: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Rolling:
    """GM by rolling period [m] and its standard uncertainty: a plausibility check, never a result.

    ``period`` [s] is the mean full roll; ``factor`` the f of GM = (f B / T)^2; ``agrees`` whether
    it is within two standard uncertainties of the GM measured by inclining.
    """

    period: float
    factor: float
    gm: float
    u_gm: float
    agrees: bool
    note: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Reduction:
    """The reduction of a trial: its outcome, and what it would be with the excluded readings."""

    trial: Trial
    outcome: Outcome
    with_excluded: Outcome | None
    """The outcome with every reading counted; None when nothing is excluded."""
    simulation: Simulation | None
    """Monte Carlo through the same chain; None when it was not asked for."""
    checks: tuple[Check, ...] = ()
    diagnosis: Diagnosis | None = None
    rolling: Rolling | None = None
    remarks: tuple[str, ...] = ()
    """Assumptions and refusals that a reviewer should see, one sentence each."""

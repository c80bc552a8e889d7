"""The result as one JSON object for other programs: metres, tonnes, degrees where a key says so.

``format`` is raised when a key changes its meaning; keys may be added without raising it.
"""

from __future__ import annotations

import json
import math
from dataclasses import asdict
from typing import TYPE_CHECKING, Any

import incline
from incline.model import KEYS
from incline.result import FORMAT

if TYPE_CHECKING:
    from incline.result import (
        Budget,
        Diagnosis,
        Estimate,
        HullEntry,
        Outcome,
        Reduction,
        Rolling,
        Simulation,
        SlopeUncertainty,
    )

__all__ = ["FORMAT", "to_dict", "to_json"]


def to_json(reduction: Reduction) -> str:
    """The result as JSON text ending in a newline; the same reduction gives the same bytes."""
    return json.dumps(to_dict(reduction), indent=2, ensure_ascii=False, allow_nan=False) + "\n"


def to_dict(reduction: Reduction) -> dict[str, Any]:
    """The result as plain dictionaries, lists, numbers and text."""
    trial = reduction.trial
    counted = reduction.with_excluded
    return {
        "format": FORMAT,
        "program": {"name": "incline", "version": incline.__version__},
        "trial": {
            "name": trial.vessel.name,
            "date": trial.occasion.date.isoformat(),
            "digest": trial.digest,
            "lpp_m": trial.vessel.lpp,
        },
        **_outcome(reduction.outcome),
        "checks": [asdict(check) for check in reduction.checks],
        **_diagnosis(reduction.diagnosis),
        "rolling": None if reduction.rolling is None else _rolling(reduction.rolling),
        "excluded": [
            {"shift": r.shift, "device": r.device, "reason": r.excluded}
            for r in trial.readings
            if r.excluded
        ],
        "monte_carlo": None if reduction.simulation is None else _monte_carlo(reduction.simulation),
        "with_excluded_readings": None if counted is None else _outcome(counted),
        "remarks": list(reduction.remarks),
    }


def _outcome(outcome: Outcome) -> dict[str, Any]:
    light = outcome.lightship
    return {
        "as_inclined": _as_inclined(outcome),
        "heel": _heel(outcome),
        "free_surface": {
            "moment_tm": outcome.free_surface.moment,
            "correction_m": outcome.free_surface.correction,
        },
        "ledger": {
            "deduct_t": outcome.ledger.deduct,
            "add_t": outcome.ledger.add,
            "relocate_t": outcome.ledger.relocate,
            "balance_residual_tm": outcome.ledger.balance,
        },
        "lightship": {
            "displacement_t": _estimate(light.displacement),
            "vcg_m": _estimate(light.vcg),
            "lcg_m": _estimate(light.lcg),
            "tcg_m": _estimate(light.tcg),
        },
        "covariance": [list(row) for row in outcome.covariance],
        "uncertainty": {
            "slope": _slope(outcome.slope_uncertainty),
            "budgets": {b.key: _budget(b) for b in outcome.budgets},
            "kg_above_limit_probability": outcome.kg_above_limit,
        },
    }


def _as_inclined(outcome: Outcome) -> dict[str, Any]:
    ship = outcome.as_inclined
    return {
        "density_t_m3": ship.density,
        "draft_ap_m": ship.draft_ap,
        "draft_fp_m": ship.draft_fp,
        "trim_m": ship.trim,
        "deflection_m": ship.waterline.deflection,
        "list_deg": None if ship.list_tan is None else math.degrees(math.atan(ship.list_tan)),
        "volume_m3": ship.volume,
        "displacement_t": ship.displacement,
        "lcb_m": ship.lcb,
        "kb_m": ship.kb,
        "bmt_m": ship.bmt,
        "kmt_m": ship.kmt,
        "vcg_m": ship.vcg,
        "lcg_m": ship.lcg,
        "tcg_m": ship.tcg,
        "hull": None if ship.hull is None else _hull(ship.hull),
    }


def _hull(hull: HullEntry) -> dict[str, Any]:
    """How the hull was integrated; shares of volume, KM and LCB [m] as lists."""
    surface = [None if math.isnan(m) else m for m in hull.surface]
    return {
        "stations": hull.stations,
        "points": hull.points,
        "least_freeboard_m": hull.freeboard,
        "layers": [list(layer) for layer in hull.layers],
        "spacing_of_stations": list(hull.by_stations),
        "spacing_of_points": list(hull.by_points),
        "table_less_integration": None if hull.table is None else list(hull.table),
        "response_surface_error": dict(zip(KEYS, surface, strict=False)),
    }


def _heel(outcome: Outcome) -> dict[str, Any]:
    heel = outcome.heel
    return {
        "method": heel.method,
        "gm_fluid_m": heel.gm_fluid,
        "slope_per_tm": heel.slope,
        "u_gm_fluid_m": heel.u_gm_fluid,
        "degrees_of_freedom": heel.dof,
        "residual_sd": heel.residual_sd,
        "devices": [
            {"id": d.id, "gm_m": d.gm, "u_gm_m": d.u_gm, "r_squared": d.r_squared}
            for d in heel.devices
        ],
        "max_heel_deg_port": math.degrees(heel.max_heel_port),
        "max_heel_deg_starboard": math.degrees(heel.max_heel_starboard),
        "other_methods": [
            {"method": m.method, "vcg_m": m.vcg, "gm_fluid_m": m.gm_fluid} for m in heel.others
        ],
    }


def _rolling(rolling: Rolling) -> dict[str, Any]:
    return {
        "period_s": rolling.period,
        "factor": rolling.factor,
        "gm_m": rolling.gm,
        "u_gm_m": rolling.u_gm,
        "agrees": rolling.agrees,
        "note": rolling.note,
    }


def _estimate(estimate: Estimate) -> dict[str, float | None]:
    return {
        "value": estimate.value,
        "u": estimate.u,
        "U": estimate.U,
        "k": estimate.k,
        "degrees_of_freedom": estimate.dof,
    }


def _slope(slope: SlopeUncertainty) -> dict[str, Any]:
    return {
        "u_per_tm": slope.u,
        "degrees_of_freedom": slope.dof,
        "u_ship_per_tm": slope.ship,
        "u_devices_per_tm": slope.device,
        "u_readings_per_tm": slope.reading,
        "reason": slope.reason,
    }


def _budget(budget: Budget) -> dict[str, Any]:
    """Estimate and lines; u, sensitivity and contribution are in metres, tonnes and fractions."""
    return {
        **_estimate(budget.estimate),
        "inputs": [
            {
                "name": line.name,
                "u": line.u,
                "kind": "slope" if line.quantity is None else line.quantity.name,
                "basis": line.basis,
                "distribution": line.shape,
                "degrees_of_freedom": line.dof if math.isfinite(line.dof) else None,
                "sensitivity": line.sensitivity,
                "contribution": line.part,
                "share": line.share,
            }
            for line in budget.lines
        ],
    }


def _monte_carlo(simulation: Simulation) -> dict[str, Any]:
    return {
        "draws": simulation.draws,
        "seed": simulation.seed,
        "settled": simulation.settled,
        "results": {
            r.key: {
                "mean": r.mean,
                "u": r.u,
                "symmetric_95": list(r.symmetric),
                "shortest_95": list(r.shortest),
                "tolerance": r.tolerance,
                "first_order_validated": r.agrees,
            }
            for r in simulation.results
        },
        "covariance": [list(row) for row in simulation.covariance],
        "kg_above_limit_probability": simulation.kg_above_limit,
    }


def _diagnosis(diagnosis: Diagnosis | None) -> dict[str, Any]:
    """Findings, what would not have shown, and the influence of each reading, shift and device."""
    if diagnosis is None:
        return {"findings": [], "unseen": [], "influence": []}
    return {
        "findings": [
            {
                "cause": f.cause,
                "where": f.where,
                "shift": f.shift,
                "device": f.device,
                "score": f.score,
                "critical": f.critical,
                "rank": f.rank,
                "size": f.size,
                "vcg_if_so_m": f.vcg_if_so,
                "advice": f.advice,
            }
            for f in diagnosis.findings
        ],
        "unseen": [
            {
                "cause": u.cause,
                "size_tangent": u.size,
                "vcg_change_m": u.vcg,
                "excluded_by": u.excluded_by,
            }
            for u in diagnosis.unseen
        ],
        "influence": [
            {"shift": i.shift, "device": i.device, "vcg_change_m": i.change}
            for i in diagnosis.influence
        ],
    }

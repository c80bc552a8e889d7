"""Checks, findings and a rolling test of the made trial, set by hand."""

from incline.errors import Where
from incline.record import RollingRun
from incline.result import Check, Diagnosis, Finding, Influence, Rolling, Unseen

REASON = "the <b>society</b> & owner agreed"
EVIDENCE = {"liquids": "sounded before & after <both>", "lines": "not excluded"}
ROLLS = tuple(
    RollingRun(run=str(n), rolls=rolls, time=time, where=Where("rolls.csv", n + 1))
    for n, (rolls, time) in enumerate(((6, 33.0), (6, 34.2)), start=1)
)
ROLLING = Rolling(
    period=5.6, factor=0.78, gm=1.0057, u_gm=0.13, agrees=True, note="2 runs, fewer than 3."
)


def _check(**given: object) -> Check:
    plain = {
        "unit": "", "rule_set": "IMO", "source": "Code, part B", "edition": "edition of 2008",
        "evidence": "read", "note": "",
    }  # fmt: skip
    return Check(**{**plain, **given})


CHECKS = (
    _check(id="swing", title="Deflection of each device", status="pass", found=12.7, limit="at least 10", unit="cm",
           evidence="memory", note="The limit is from memory: verify against the current edition. At P1."),
    _check(id="drafts-fit", title="Drafts on one waterline", status="fail", found=1.9, limit="at most 1", unit="cm",
           note="Read them again."),
    _check(id="gm-small", title="Least GM", status="not applicable", found=1.05, limit="at least 0.2", unit="m",
           rule_set="class", note="For information: the trial is judged by IMO. It would pass."),
    _check(id="hydrometer", title="Range of the hydrometer", status="not recorded", found=None, limit="covers 0.999 to 1.030",
           edition="", note="Not recorded: the range of the hydrometer."),
    _check(id="weights", title="Certificates", status="pass", found="4 of 4", limit="all", rule_set="trial",
           evidence="stated", note=f"The trial's own limit: {REASON}."),
)  # fmt: skip

LINE = "line, fender or ground holding"
LENGTH_WRONG = "wrong length or scale"


def diagnosis(outcome, *, found=True):
    """Two findings, the first with a rival; or none."""
    counted = [p for p in outcome.heel.points if not p.excluded]
    now = outcome.lightship.vcg.value
    largest = max(p.moment for p in counted)

    def line(p):
        return p.fitted - 0.0008 * max(0.0, p.moment / largest - 0.4)

    def finding(cause, rank, change, expected, **given):
        plain = {"where": "ship", "shift": None, "device": None, "score": 24.56, "critical": 8.71,
                 "size": "+0.113 deg, heeled to starboard", "advice": f"See to it: {cause}."}  # fmt: skip
        return Finding(
            cause=cause, rank=rank, vcg_if_so=now + change, expected=tuple(expected),
            **{**plain, **given},
        )  # fmt: skip

    first = [line(p) for p in counted]
    both = [
        t + 0.0005 * p.moment / largest * (p.device == "P2 <mid>")
        for t, p in zip(first, counted, strict=True)
    ]
    findings = (
        finding(LINE, 0, 0.0214, first),
        finding("one disturbed shift", 1, -0.0031, first, shift=2),
        finding(LENGTH_WRONG, 0, 0.0302, both, where="device", device="P2 <mid>",
                size="another length would agree", critical=11.94),
    )  # fmt: skip
    return Diagnosis(
        findings=findings if found else (),
        unseen=(
            Unseen(cause="liquid at tank top or bottom", size=0.0025, vcg=-0.0561, excluded_by=EVIDENCE["liquids"]),
            Unseen(cause=LINE, size=0.0009, vcg=-0.0108, excluded_by=""),
            Unseen(cause="wind or current changed once", size=0.0006, vcg=-0.0103, excluded_by=""),
            Unseen(cause="slow drift", size=0.0, vcg=0.0, excluded_by=""),
        ),
        influence=(
            *(Influence(shift=n, device=None, change=0.0004 * n) for n in range(9)),
            *(Influence(shift=None, device=d.id, change=-0.0007) for d in outcome.heel.devices),
            *(Influence(shift=p.shift, device=p.device, change=1e-4 * (i - 12.0)) for i, p in enumerate(counted)),
        ),
        critical=8.71,
    )  # fmt: skip

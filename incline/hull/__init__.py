"""The hull from its offsets: cut at the true waterline, integrated, floated at equilibrium."""

from __future__ import annotations

from incline.hull.afloat import Integrated, pose_of
from incline.hull.equilibrium import lever_slope, settle
from incline.hull.integrate import Displaced, Hull, Pose

__all__ = ["Displaced", "Hull", "Integrated", "Pose", "lever_slope", "pose_of", "settle"]

"""Reading a trial: its files to one record in metres and tonnes, or everything wrong with them."""

from incline.reading.folder import read_trial
from incline.reading.hull_only import HullRecord, read_offsets

__all__ = ["HullRecord", "read_offsets", "read_trial"]

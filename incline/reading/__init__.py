"""Reading a trial: its files to one record in metres and tonnes, or everything wrong with them."""

from incline.reading.folder import read_trial

__all__ = ["read_trial"]

"""May this instrument look there then? The Sun first, then the horizon and the mount."""

from skytiles.night.reach import reach_problems
from skytiles.night.solar_safety import solar_problems

__all__ = ["reach_problems", "solar_problems"]

"""Gains of all options of one instrument at once."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.planner.plan_problem import OptionBlock

Floats = npt.NDArray[np.float64]


def option_gains(block: OptionBlock, tile_sums: Floats, detections: Floats | None = None) -> Floats:
    """What every option of a block would find of what remains.

    Parameters
    ----------
    block : OptionBlock
    tile_sums : (k, n) float              what remains under every tile of the problem
    detections : (u, n) float or None     in the place of the block's own

    Returns
    -------
    (k, t) float    gains in expected searched, for the block's tiles and starts
    """
    rows = block.detections if detections is None else detections
    by_row = tile_sums[block.tiles] @ rows.T
    gains: Floats = np.take_along_axis(by_row, block.rows, axis=1)
    return gains

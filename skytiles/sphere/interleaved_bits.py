"""Bits of two coordinates interleaved: what NESTED numbering is made of."""

import numpy as np
from numpy.typing import NDArray

Ints = NDArray[np.int64]

_LOW_BITS = 15
_LOW_MASK = (1 << _LOW_BITS) - 1


def _spread_table() -> Ints:
    values = np.arange(1 << _LOW_BITS, dtype=np.int64)
    table = np.zeros_like(values)
    for bit in range(_LOW_BITS):
        table |= ((values >> bit) & 1) << (2 * bit)
    return table


def _squeeze_table() -> Ints:
    values = np.arange(1 << 16, dtype=np.int64)
    table = np.zeros_like(values)
    for bit in range(8):
        table |= ((values >> (2 * bit)) & 1) << bit
    return table


# SPREAD_BITS[v] puts bit k of v at bit 2k, SPREAD_ODD_BITS at bit 2k + 1; the squeeze table undoes
# the first for 16 bits at a time.
SPREAD_BITS = _spread_table()
SPREAD_ODD_BITS = SPREAD_BITS << 1
_SQUEEZED = _squeeze_table()


def spread_bits(values: Ints) -> Ints:
    """Whole numbers with a zero before each bit.

    Parameters
    ----------
    values : (n,) int    0..2^30 - 1

    Returns
    -------
    (n,) int    bit k of the value at bit 2k

    Source: definition.
    """
    low, high = SPREAD_BITS[values & _LOW_MASK], SPREAD_BITS[values >> _LOW_BITS]
    return np.asarray(low | high << 2 * _LOW_BITS)


def squeeze_bits(values: Ints) -> Ints:
    """Every second bit of whole numbers: the inverse of spread_bits.

    Parameters
    ----------
    values : (n,) int    at least 0; odd bits are ignored

    Returns
    -------
    (n,) int    bit 2k of the value at bit k

    Source: definition.
    """
    squeezed = np.zeros_like(values)
    for chunk in range(4):
        squeezed |= _SQUEEZED[(values >> (16 * chunk)) & 0xFFFF] << (8 * chunk)
    return squeezed

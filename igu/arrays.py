"""The array types used in every signature."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]
IntArray = NDArray[np.intp]
BoolArray = NDArray[np.bool_]
ComplexArray = NDArray[np.complex128]

__all__ = ["Array", "ArrayLike", "BoolArray", "ComplexArray", "IntArray"]

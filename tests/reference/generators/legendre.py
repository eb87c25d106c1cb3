"""Gauss-Legendre collocation on one element: nodes, derivative matrix, end values, weights.

The points include the element's start (index 0) followed by the Gauss points in (0, 1). A polynomial of degree d
through those d + 1 points has derivative DERIVATIVE[j, k] at point k and value END[j] at 1; WEIGHTS integrates the
derivative values at the Gauss points to order 2 d. Source: Hairer & Wanner, Solving ODEs II, IV.5 (Gauss methods).
"""

import numpy as np


def gauss(degree):
    """Return (points, derivative, end, weights) for the given number of Gauss points."""
    x, w = np.polynomial.legendre.leggauss(degree)
    points = np.concatenate([[0.0], 0.5 * (x + 1.0)])
    derivative = np.zeros((degree + 1, degree + 1))
    end = np.zeros(degree + 1)
    for j in range(degree + 1):
        basis = np.poly1d([1.0])
        for k in range(degree + 1):
            if k != j:
                basis *= np.poly1d([1.0, -points[k]]) / (points[j] - points[k])
        end[j] = basis(1.0)
        derivative[j, :] = np.polyder(basis)(points)
    return points, derivative, end, 0.5 * w

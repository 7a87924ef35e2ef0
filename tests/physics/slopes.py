"""Derivatives of smooth functions from five points, for tests that hold code against itself."""

import numpy as np

_OFFSETS = np.arange(-2, 3)


def first(function, at, step=1e-3):
    """df/dx at ``at``; the error goes as step^4 and as rounding/step."""
    return function(at + step * _OFFSETS) @ np.array([1, -8, 0, 8, -1]) / (12 * step)


def second(function, at, step=1e-2):
    """d2f/dx2 at ``at``; the error goes as step^4 and as rounding/step^2."""
    return function(at + step * _OFFSETS) @ np.array([-1, 16, -30, 16, -1]) / (12 * step**2)


def order(steps, errors):
    """The power with which errors fall: slope of their logarithms."""
    return np.polyfit(np.log(steps), np.log(np.abs(errors)), 1)[0]

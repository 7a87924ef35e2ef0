"""Averages over an isentropic star of gas and radiation in the shape of the n = 3 sphere.

Density follows rho_c theta^3 and the entropy is uniform, so that the ratio of radiation to gas pressure varies a
little from centre to surface. The averages that the energy of such a star needs depend on one number only, beta_c at
the centre, and are kept as polynomials in beta_c over 0..0.8 (error below 1e-9 of each, held by a test); beyond,
which is below 30 solar masses, they are summed directly.
"""

from functools import cache

import numpy as np
from numpy.polynomial import chebyshev

from massdash.physics.eos import adiabatic_index_excess, isentrope
from massdash.physics.polytrope import standard_model

DEGREE = 24
TOP = 0.8  # largest beta_c of the series


def averages_by_nodes(beta):
    """The averages by quadrature; for tests and to build the series. Shapes as ``beta``.

    Returns (work, gas, excess): ``work`` is the mass average of P/rho over its central value; ``gas`` and ``excess``
    are the averages of beta and of Gamma_1 - 4/3 weighted with P/rho.
    """
    sphere = standard_model()
    beta = np.asarray(beta, float)[..., None]
    z_c = (1.0 - beta) / beta
    z = isentrope(z_c, sphere.theta**3)
    work = np.cbrt(z / z_c) * sphere.theta * (1.0 + z) / (1.0 + z_c) * sphere.weight  # P/rho ~ (rho z)^(1/3) (1 + z)
    total = work.sum(-1)
    local = 1.0 / (1.0 + z)
    return total, (work * local).sum(-1) / total, (work * adiabatic_index_excess(local)).sum(-1) / total


@cache
def _series():
    """Coefficients (DEGREE + 1, 3) of work, gas/beta and excess/beta as polynomials in x = 2 beta_c/TOP - 1.

    Found as Chebyshev series and written out in powers of x: their coefficients fall so fast that none of the powers'
    exceeds about one, so nothing is lost, and powers need one product of matrices where the series needs a loop.
    """
    nodes = chebyshev.chebpts1(DEGREE + 1)
    beta = TOP * (nodes + 1.0) / 2.0
    work, gas, excess = averages_by_nodes(beta)
    columns = chebyshev.chebfit(nodes, np.stack([work, gas / beta, excess / beta], axis=-1), DEGREE).T
    return np.stack([chebyshev.cheb2poly(column) for column in columns], axis=-1)


def averages(beta):
    """(work, gas, excess) of ``averages_by_nodes``, fast for arrays of any size."""
    beta = np.asarray(beta, float)
    if np.any(beta > TOP):
        return averages_by_nodes(beta)
    powers = np.ones((*beta.shape, DEGREE + 1))
    powers[..., 1:] = (2.0 * beta / TOP - 1.0)[..., None]
    np.multiply.accumulate(powers, axis=-1, out=powers)
    found = powers @ _series()
    return found[..., 0], found[..., 1] * beta, found[..., 2] * beta

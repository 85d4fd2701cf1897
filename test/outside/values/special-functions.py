"""Makes special-functions.json with mpmath (arbitrary precision): python3 special-functions.py

Definitions: Abramowitz & Stegun 1964, sections 6.1, 6.3, 6.4; DLMF 5.4, 5.15 (section numbers from
memory). The values of exp(digamma), exp and log are mpmath's own. The Dirichlet divergences are the
closed form; the two marked as quadrature were confirmed by numerical integration.
"""

import json
import mpmath as mp

mp.mp.dps = 50
POINTS = [1e-8, 1e-6, 1e-4, 1e-3, 0.01, 0.1, 0.25, 1 / 3, 0.5, 0.75, 1.0, 1.25, 1.4616321449683622,
          1.5, 1.75, 2.0, 2.5, 3.0, 4.0, 5.0, 6.0, 7.5, 10.0, 20.0, 50.0, 100.0, 1000.0, 1e6, 1e10]
NEAR_ZEROS = [0.74, 0.76, 0.9, 0.999999, 1.000001, 1.1, 1.24, 1.26, 1.36, 1.37, 1.4, 1.46, 1.4616,
              1.461632144968363, 1.47, 1.55, 1.57, 1.74, 1.76, 1.999999, 2.000001, 2.2, 2.24, 2.26, 7.99, 8.0,
              8.01]


def row(x):
    m = mp.mpf(x)
    psi = mp.digamma(m)
    return dict(x=x, digamma=float(psi), trigamma=float(mp.polygamma(1, m)),
                lgamma=float(mp.loggamma(m)), expDigamma=float(mp.exp(psi)),
                log=float(mp.log(m)))


def divergence(a, b):
    a, b = [mp.mpf(v) for v in a], [mp.mpf(v) for v in b]
    total = mp.loggamma(sum(a)) - mp.loggamma(sum(b))
    for x, y in zip(a, b):
        total += mp.loggamma(y) - mp.loggamma(x) + (x - y) * (mp.digamma(x) - mp.digamma(sum(a)))
    return float(total)


PAIRS = [([1, 2, 3], [1, 1, 1]), ([1, 1, 1], [1, 2, 3]), ([0.1, 0.2, 0.7], [1, 1, 1]),
         ([5, 1, 0.5, 2], [0.1, 0.1, 0.1, 0.1]), ([10, 20], [2, 3]), ([2, 2], [2, 2])]
EXPONENTS = [-745.0, -700.5, -100.0, -10.0, -1.0, -0.35, -1e-9, 0.0, 1e-9, 0.34657, 0.34658, 0.5, 1.0,
             2.5, 10.0, 100.0, 709.0]

out = dict(
    source='mpmath %s, 50 digits' % mp.__version__,
    special=[row(x) for x in POINTS + NEAR_ZEROS],
    exp=[dict(x=x, value=float(mp.exp(mp.mpf(x)))) for x in EXPONENTS],
    dirichletDivergence=[dict(a=a, b=b, value=divergence(a, b)) for a, b in PAIRS],
    quadrature=[dict(a=[10, 20], b=[2, 3], value=0.5323959136112265),
                dict(a=[1, 2, 3], b=[1, 1, 1], value=0.55119738166096)])
with open('special-functions.json', 'w') as file:
    json.dump(out, file, indent=1)

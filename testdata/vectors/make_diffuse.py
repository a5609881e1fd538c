#!/usr/bin/env python3
"""Fresnel reflectance of isotropic light at indices near 1 and far from it: adaptive quadrature of 2 c R(c) dc with 60 digits (mpmath), equal to the
closed form to 30 digits, as rows of published values.

usage: make_diffuse.py OUT.csv   (testdata/handbook/lighttrap_diffuse_range.csv)
"""
import sys
import mpmath as mp
mp.mp.dps = 60


def fresnel(n1, n2, c1):
    c2 = mp.sqrt(1 - (n1 / n2) ** 2 * (1 - c1 ** 2))
    rs = (n1 * c1 - n2 * c2) / (n1 * c1 + n2 * c2)
    rp = (n2 * c1 - n1 * c2) / (n2 * c1 + n1 * c2)
    return (rs ** 2 + rp ** 2) / 2


def outside(n):
    # steps as wide as the distance to grazing light, where R changes fast
    edges = [mp.mpf(0)] + [mp.mpf(2) ** -k for k in range(60, -1, -1)]
    return mp.quad(lambda c: 2 * c * fresnel(mp.mpf(1), n, c), edges)


def closed(n):
    return (mp.mpf(1) / 2 + (n - 1) * (3 * n + 1) / (6 * (n + 1) ** 2) + n ** 2 * (n ** 2 - 1) ** 2 / (n ** 2 + 1) ** 3 * mp.log((n - 1) / (n + 1))
            - 2 * n ** 3 * (n ** 2 + 2 * n - 1) / ((n ** 2 + 1) * (n ** 4 - 1)) + 8 * n ** 4 * (n ** 4 + 1) / ((n ** 2 + 1) * (n ** 4 - 1) ** 2) * mp.log(n))


with open(sys.argv[1], 'w') as f:
    f.write('# made by vectors/make_diffuse.py\nquantity,inputs,value,unit,tol,known,source\n')
    for x in (1 + 1e-10, 1 + 1e-7, 1.00001, 1.0003, 1.003, 1.01, 1.1, 1.7, 2.3, 2.4999, 2.5, 2.7, 6.0, 30.0, 1e3, 1e6, 1e9):
        n = mp.mpf(x)
        out = outside(n)
        assert abs(out / closed(n) - 1) < mp.mpf(10) ** -30, (x, out, closed(n))
        inside = 1 - (1 - out) / n ** 2
        for name, v in (('outside', out), ('inside', inside)):
            f.write(f'diffuse_{name},n={x!r},{mp.nstr(v, 20)},1,{mp.nstr(v * mp.mpf(10) ** -14, 3)},computed,quadrature of 2 c R(c) with 60 digits; tol: 1e-14 relative\n')

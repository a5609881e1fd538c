#!/usr/bin/env python3
"""Transmittance 2 E3(x) of isotropic light through a slab and 1 - 2 E3(x), with 40 digits (mpmath), as rows of published values.

usage: make_e3.py OUT.csv   (testdata/handbook/lighttrap_transmittance.csv)
"""
import sys
import mpmath as mp
mp.mp.dps = 60
with open(sys.argv[1], 'w') as f:
    f.write('# made by vectors/make_e3.py\nquantity,inputs,value,unit,tol,known,source\n')
    for e in range(-24, 7):
        for m in (1, 1.7):
            x = m * 10.0 ** (e / 2)
            if x > 1000:
                continue
            t = 2 * mp.expint(3, mp.mpf(x))
            if t > mp.mpf(10) ** -300:
                f.write(f'diffuse_transmittance,x={x!r},{mp.nstr(t, 20)},1,{mp.nstr(t * mp.mpf(10) ** -14, 3)},computed,2 E3(x) with 60 digits; tol: 1e-14 relative\n')
            f.write(f'diffuse_loss,x={x!r},{mp.nstr(1 - t, 20)},1,{mp.nstr((1 - t) * mp.mpf(10) ** -14, 3)},computed,1 - 2 E3(x) with 60 digits; tol: 1e-14 relative\n')

#!/usr/bin/env python3
"""Slabs with Lambertian or planar faces, solved as a linear system of the four fluxes at the faces with 500 digits (mpmath), one JSON object a line.

usage: make_slabs.py OUT.jsonl   (testdata/vectors/slabs.jsonl)

down0, down1: flux that starts down at the front and that arrives at the rear after later passes; the first pass is on its own. Derivatives are
central differences of the solution with a step of 1e-80 x.
"""
import json
import random
import sys
import mpmath as mp
mp.mp.dps = 500


def solve(model, x, cos, r, rf, rb):
    straight, diffuse = mp.exp(-x / cos), 2 * mp.expint(3, x)
    first = diffuse if model == 'lambertian' else straight
    later = straight if model == 'planar' else diffuse
    enter = 1 - r
    # unknowns: arriving at the rear, leaving it upwards, arriving at the front, sent down again
    m = mp.matrix([[1, 0, 0, -later], [-rb, 1, 0, 0], [0, -later, 1, 0], [0, 0, -rf, 1]])
    rear, up, front, down = mp.lu_solve(m, mp.matrix([enter * first, 0, 0, 0]))
    absorbed = enter * (1 - first) + (up + down) * (1 - later)
    out = absorbed, front * (1 - rf), rear * (1 - rb)
    assert abs(sum(out) - enter) < mp.mpf(10) ** -450
    return out


rng = random.Random(7)
with open(sys.argv[1], 'w') as f:
    for i in range(240):
        x, cos = 10 ** rng.uniform(-12, 2.3), rng.uniform(0.5, 1)
        r, rf, rb = rng.random() ** 3, 1 - rng.random() ** 3, 1 - rng.random() ** 3
        if i % 5 == 0:
            rb = 1.0
        if i % 7 == 0:
            rf, rb = 1 - 1 / 3.5 ** 2, 1 - 10 ** rng.uniform(-9, -2)
        model = ('lambertian', 'lambertian rear', 'planar')[i % 3]
        a = [mp.mpf(v) for v in (x, cos, r, rf, rb)]
        shares = solve(model, *a)
        h = a[0] * mp.mpf(10) ** -80
        slopes = [(p - q) / (2 * h) for p, q in zip(solve(model, a[0] + h, *a[1:]), solve(model, a[0] - h, *a[1:]))]
        enter = 1 - a[2]
        path = -mp.log1p(-shares[0] / enter) / a[0]
        row = dict(model=model, x=x, cos=cos, front=r, inside=rf, rear=rb)
        for name, v in zip(('absorbed', 'escaped', 'rear_loss', 'slope', 'escaped_slope', 'rear_loss_slope', 'path'), (*shares, *slopes, path)):
            row[name] = float(v)
        f.write(json.dumps(row) + '\n')

#!/usr/bin/env python3
"""High-precision shares of mixed stacks, and derivatives of the shares of all kinds of stacks.

usage: make_derivatives.py STACKS.jsonl MIXED.jsonl DERIVATIVES.jsonl     (the files here: stacks.jsonl mixed.jsonl derivatives.jsonl, seed 11)

Coherent films: the linear system of boundary conditions of make_stacks.py, for any pair of outer media. Mixed stacks: the intensities that travel
forward and backward in every incoherent film are unknowns of one linear system. Derivatives: difference quotients of second order with the step
1e-25 at 80 digits (one-sided where k = 0, because the fields behind decay on one side only). Order of the derivatives: thickness of every film (1/nm),
n of every film, k of every film, n and k of the back medium. 'cond' of the shares: see make_stacks.py.

A film is opaque when its wave decays faster than it oscillates (Im q >= Re q). The net flux of two waves in an absorbing film of incidence is not
the difference of their fluxes; the rest, 1 - r - t - sum(a) of the group of coherent films, is counted as absorbed in that film.
"""
import json, math, random, sys
import mpmath as mp
import make_stacks as ms
mp.mp.dps = 80
STEP = mp.mpf(10)**-25
def group(N, d, kx, k0, pol):
    """r, t, d (interference flux) and the absorptances of the films N[1..S] between N[0], where the light comes from, and N[S+1]."""
    S = len(d)
    q = [ms.sq(z*z-kx*kx) for z in N]
    g = [q[i] if pol == 's' else q[i]/(N[i]*N[i]) for i in range(S+2)]
    ph = [mp.mpc(1)]+[mp.exp(1j*k0*q[j]*d[j-1]) for j in range(1, S+1)]
    n_ = 2*S+2
    rows = [dict() for _ in range(n_)]; rhs = [mp.mpc(0)]*n_
    rhs[0] = mp.mpc(-1); rhs[1] = -g[0]
    rows[0][0] = mp.mpc(1); rows[1][0] = -g[0]
    for i in range(S+1):
        a, b = rows[2*i], rows[2*i+1]
        if i > 0:
            a[2*i-1], b[2*i-1] = ph[i], g[i]*ph[i]
            a[2*i], b[2*i] = mp.mpc(1), -g[i]
        if i == S:
            a[2*S+1], b[2*S+1] = mp.mpc(-1), -g[S+1]
        else:
            j = i+1
            a[2*j-1], b[2*j-1] = mp.mpc(-1), -g[j]
            a[2*j], b[2*j] = -ph[j], g[j]*ph[j]
    x = ms.solve_band(rows, rhs, n_)
    def flux(i):
        if i == S: return abs(x[2*S+1])**2*g[S+1].real
        a, b = x[2*i+1], x[2*i+2]*ph[i+1]
        return ((a+b)*mp.conj(g[i+1]*(a-b))).real
    F = [flux(i)/g[0].real for i in range(S+1)]
    r, t, a = abs(x[0])**2, F[S], [F[i]-F[i+1] for i in range(S)]
    return r, t, 1-r-t-sum(a), a
def shares(c, pol):
    """[R, T, A_0, A_1, ...] of the stack c = (front n, angle, wavelength, d, n, k, back n, back k, incoherent)."""
    n0, th, lam, d, n, k, nb, kb, inc = c
    S = len(d); kx = n0*mp.sin(th); k0 = 2*mp.pi/lam
    N = [mp.mpc(n[j], k[j]) for j in range(S)]
    thick = [j for j in range(S) if inc[j]]
    outer = [mp.mpc(n0)]+[N[j] for j in thick]+[mp.mpc(nb, kb)]
    cuts = [-1]+thick+[S]
    films = [list(range(cuts[i]+1, cuts[i+1])) for i in range(len(cuts)-1)]
    m = len(thick)
    q = [ms.sq(z*z-kx*kx) for z in outer[1:-1]]
    e = [mp.mpf(0) if q[i].imag >= q[i].real else mp.exp(-2*k0*d[thick[i]]*q[i].imag) for i in range(m)]
    zero = mp.mpf(0)
    def lit(i, into, back, order):
        # Nothing lights a group from an opaque film.
        if i > 0 and e[i-1] == 0: return zero, zero, zero, [zero]*len(order)
        return group([into]+[N[j] for j in order]+[back], [d[j] for j in order], kx, k0, pol)
    fwd = [lit(i, outer[i], outer[i+1], films[i]) for i in range(m+1)]
    if m == 0:
        r, t, _, a = fwd[0]
        return [r, t]+a
    rev = [lit(i+1, outer[i+1], outer[i], films[i][::-1]) for i in range(m)]
    # Unknowns: F_i entering film i at its front, H_i starting backwards at its back.
    M = mp.eye(2*m); rhs = mp.matrix(2*m, 1)
    for i in range(m):
        if i == 0: rhs[0] = fwd[0][1]
        else: M[2*i, 2*(i-1)] -= e[i-1]*fwd[i][1]
        M[2*i, 2*i+1] -= e[i]*rev[i][0]
        M[2*i+1, 2*i] -= e[i]*fwd[i+1][0]
        if i+1 < m: M[2*i+1, 2*(i+1)+1] -= e[i+1]*rev[i+1][1]
    x = mp.lu_solve(M, rhs)
    F, H = [x[2*i] for i in range(m)], [x[2*i+1] for i in range(m)]
    R = fwd[0][0]+e[0]*H[0]*rev[0][1]
    T = e[m-1]*F[m-1]*fwd[m][1]
    A = [zero]*S
    for i in range(m+1):
        into = mp.mpf(1) if i == 0 else e[i-1]*F[i-1]
        back = zero if i == m else e[i]*H[i]
        for p, j in enumerate(films[i]):
            A[j] = into*fwd[i][3][p]
            if i < m: A[j] += back*rev[i][3][len(films[i])-1-p]
    for i, j in enumerate(thick):
        A[j] = (F[i]+H[i])*(1-e[i])+e[i]*F[i]*fwd[i+1][2]+e[i]*H[i]*rev[i][2]
    return [R, T]+A
def jacobian(c, pol):
    """Rows: R, T, A_j; columns: the variables."""
    n0, th, lam, d, n, k, nb, kb, inc = c
    S = len(d); v = list(d)+list(n)+list(k)+[nb, kb]
    def at(w): return shares((n0, th, lam, w[:S], w[S:2*S], w[2*S:3*S], w[3*S], w[3*S+1], inc), pol)
    base = at(v); cols = []
    for i in range(3*S+2):
        def moved(h): w = list(v); w[i] = w[i]+h; return at(w)
        if v[i] == 0:
            f1, f2 = moved(STEP), moved(2*STEP)
            cols.append([(-3*a+4*b-c2)/(2*STEP) for a, b, c2 in zip(base, f1, f2)])
        else:
            f1, f2 = moved(STEP), moved(-STEP)
            cols.append([(a-b)/(2*STEP) for a, b in zip(f1, f2)])
    return base, [[cols[i][o] for i in range(3*S+2)] for o in range(S+2)]
def exact(c):
    n0, th, lam, d, n, k, nb, kb, inc = c
    M = mp.mpf
    return M(n0), M(th), M(lam), [M(x) for x in d], [M(x) for x in n], [M(x) for x in k], M(nb), M(kb), inc
def nudged(c):
    eps = mp.mpf(2)**-53
    for i in range(3):
        e = list(c); e[i] = e[i]*(1+eps); yield tuple(e)
def row(name, c):
    n0, th, lam, d, n, k, nb, kb, inc = c
    return {'class': name, 'wavelength_nm': lam, 'angle_rad': th, 'front_n': n0, 'back_n': nb, 'back_k': kb,
            'thickness_nm': list(d), 'n': list(n), 'k': list(k), 'incoherent': list(inc)}
def values(c, pol):
    c = exact(c); v = shares(c, pol)
    assert abs(sum(v)-1) < mp.mpf(10)**-50
    cond = sum(max(abs(a-b) for a, b in zip(shares(e, pol), v)) for e in nudged(c))
    return {'R': float(v[0]), 'T': float(v[1]), 'A': [float(a) if kk > 0 else 0.0 for a, kk in zip(v[2:], c[5])], 'cond': float(cond)}
def derivatives(c, pol):
    base, J = jacobian(exact(c), pol)
    assert abs(sum(base)-1) < mp.mpf(10)**-50
    num = lambda r: [float(x) for x in r]
    return {'R': num(J[0]), 'T': num(J[1]), 'A': [num(r) for r in J[2:]]}
def coherent_cases(path):
    """A few of every class of stacks.jsonl, and some more at normal incidence."""
    count, out = {}, []
    for line in open(path):
        v = json.loads(line); S = len(v['n']); name = v['class']
        want = 1 if S == 20 else 5 if S <= 5 else 0
        key = (name, S == 20)
        if count.get(key, 0) >= want: continue
        count[key] = count.get(key, 0)+1
        out.append((name, (v['front_n'], v['angle_rad'], v['wavelength_nm'], v['thickness_nm'], v['n'], v['k'], v['back_n'], v['back_k'], [False]*S)))
        if name in ('benign', 'thick absorbing') and count[key] <= 3:
            out.append(('normal incidence', (v['front_n'], 0.0, v['wavelength_nm'], v['thickness_nm'], v['n'], v['k'], v['back_n'], v['back_k'], [False]*S)))
    rnd = random.Random(12); U = rnd.uniform
    L = lambda a, b: math.exp(U(math.log(a), math.log(b)))
    for i in range(12):
        S, lam = rnd.randint(1, 4), U(300, 1200)
        out.append(('very thick', (U(1, 1.6), rnd.choice([0.0, U(0, 1.5)]), lam, [L(1, 1e4)*lam for _ in range(S)], [U(.05, 4) for _ in range(S)],
                                   [rnd.choice([0.0, L(1e-6, 10)]) for _ in range(S)], U(1, 4), rnd.choice([0.0, U(0, 8)]), [False]*S)))
    # Films thinner than a thousandth of a wavelength, one of them absent.
    out.append(('thin', (1.0, 0.6, 600.0, [0.0, 0.3, 1e-3, 50.0], [1.5, 0.2, 3.0, 2.0], [0.0, 3.5, 0.5, 0.0], 3.5, 0.01, [False]*4)))
    return out
def mixed_cases(count):
    rnd = random.Random(11); U = rnd.uniform
    L = lambda a, b: math.exp(U(math.log(a), math.log(b)))
    out = []
    for i in range(count):
        name = ['mixed', 'mixed grazing', 'mixed trapped', 'mixed absorbing', 'mixed opaque'][i % 5]
        lam = U(300, 1200); th = 0.0 if i % 7 == 0 else U(0, 1.3); n0 = U(1, 1.6); nb, kb = U(1, 4), rnd.choice([0, L(1e-6, 1)])
        inc = [False]*rnd.randint(0, 3)+[True]+[False]*rnd.randint(0, 2)+rnd.choice([[], [True], [True, False]])
        S = len(inc); d, n, k = [], [], []
        for f in inc:
            n.append(U(1.3, 3.5))
            d.append(L(2e3, 1e6) if f else U(1, 300))
            k.append(rnd.choice([0, L(1e-9, 1e-5)]) if f else rnd.choice([0, L(1e-6, 1), L(1e-3, 5)]))
        if name == 'mixed grazing': th = math.pi/2-L(1e-8, 1e-2)
        if name == 'mixed trapped': n0, th, nb, kb = U(2, 3.5), U(.2, .5), 1.0, 0.0   # the films may reflect totally on both sides
        if name == 'mixed absorbing':
            for j in range(S):
                if inc[j]: d[j], k[j] = U(3, 20)*lam, L(1e-3, .3)
        if name == 'mixed opaque':
            j = max(x for x in range(S) if inc[x])
            if i % 2: n[j], k[j] = U(.1, 1), U(2, 6)
            else: n0, th, n[j], k[j] = U(2, 3), U(1.0, 1.3), U(1.3, 1.5), rnd.choice([0, 1e-6])
            d[j] = U(20, 200)*lam
        out.append((name, (n0, th, lam, d, n, k, nb, kb, inc)))
    return out
if __name__ == '__main__':
    mixed = mixed_cases(100)
    with open(sys.argv[2], 'w') as f:
        for name, c in mixed:
            v = row(name, c)
            for pol in 'sp': v[pol] = values(c, pol)
            f.write(json.dumps(v)+'\n')
    with open(sys.argv[3], 'w') as f:
        for name, c in coherent_cases(sys.argv[1])+mixed[:40]:
            v = row(name, c)
            for pol in 'sp': v[pol] = derivatives(c, pol)
            f.write(json.dumps(v)+'\n')
            f.flush()

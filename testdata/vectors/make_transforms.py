"""Makes handbook/nk_transforms.csv: the real part of model permittivities by
numerical Kramers-Kronig transform of their published imaginary part, with 30
digits (python3-mpmath). No closed form of the transform is used:

    eps1(E) = einf + (2/pi) * integral_0^inf [x eps2(x) - E eps2(E)]/(x^2 - E^2) dx

(the principal value of the integral of 1/(x^2 - E^2) from 0 to infinity is 0).
Usage: python3 make_transforms.py > ../handbook/nk_transforms.csv
"""
from mpmath import mp, mpf, quad, pi, exp, inf, sqrt, nstr

mp.dps = 30


def tauc(p):
    A, E0, C, Eg = (mpf(p[k]) for k in ("A", "E0", "C", "Eg"))
    return lambda x: A*E0*C*(x-Eg)**2/(((x*x-E0*E0)**2+C*C*x*x)*x) if x > Eg else mpf(0)


def cody(p):
    A, E0, G, Eg, Ep, Et, Eu = (mpf(p[k]) for k in ("A", "E0", "Gamma", "Eg", "Ep", "Et", "Eu"))

    def above(x):
        return (x-Eg)**2/((x-Eg)**2+Ep**2)*A*E0*G*x/((x*x-E0*E0)**2+G*G*x*x)
    E1 = Et*above(Et)
    return lambda x: above(x) if x > Et else E1/x*exp((x-Et)/Eu)


def urbach(p):
    S, Ed, W = (mpf(p[k]) for k in ("Strength", "Edge", "Width"))
    return lambda x: S*Ed/x*exp(-abs(x-Ed)/W)


def transform(f, E, breaks, einf):
    g0 = E*f(E)

    def integrand(x):
        if x == E:  # never hit by the rule but for rounding
            return mpf(0)
        return (x*f(x)-g0)/(x*x-E*E)
    pts = sorted(set([mpf(0), E]+breaks+[E/2, 2*E, mpf(50), mpf(1000)]))
    return einf+2/pi*(quad(integrand, pts, maxdegree=12)+quad(lambda u: integrand(1/u)/u**2, [0, 1/pts[-1]], maxdegree=12))


CASES = [
    ("cody-lorentz", cody, dict(A="70", E0="3.8", Gamma="2.2", Eg="1.6", Ep="1", Et="1.8", Eu="0.05"), "1",
     ["0.5", "1.2", "1.75", "1.8", "1.81", "2.0", "3.0", "4.0", "6.0"]),
    ("cody-lorentz", cody, dict(A="50", E0="2", Gamma="5", Eg="1.2", Ep="0.6", Et="1.2", Eu="0.04"), "1.5",
     ["0.6", "1.5", "3.5"]),
    ("cody-lorentz", cody, dict(A="50", E0="2", Gamma="4", Eg="1.2", Ep="0.6", Et="1.3", Eu="0.04"), "1.5",
     ["0.6", "1.28", "1.5", "3.5"]),
    ("tauc-lorentz", tauc, dict(A="80", E0="2", C="5", Eg="1.2"), "1.5", ["0.6", "1.5", "3.5"]),
    ("tauc-lorentz", tauc, dict(A="80", E0="2", C="4", Eg="1.2"), "1.5", ["0.6", "1.2", "1.5", "3.5"]),
    ("tauc-lorentz", tauc, dict(A="80", E0="2", C="3.9999", Eg="0"), "1.5", ["0.1", "1.5"]),
    ("urbach", urbach, dict(Strength="0.5", Edge="1.7", Width="0.06"), "0", ["0.5", "1.5", "1.69", "1.7", "1.72", "2.5"]),
]

print("# real part of model permittivities by numerical Kramers-Kronig transform of the published eps2; made by vectors/make_transforms.py")
print("quantity,inputs,value,unit,tol,known,source")
for name, make, p, einf, energies in CASES:
    f = make(p)
    breaks = [mpf(p[k]) for k in ("Eg", "Et", "Edge", "E0") if k in p]
    if "Eu" in p:
        breaks += [mpf(p["Et"])-k*mpf(p["Eu"]) for k in (1, 3, 8)]
    if "Width" in p:
        breaks += [mpf(p["Edge"])+s*k*mpf(p["Width"]) for k in (1, 3, 8, 30) for s in (1, -1) if mpf(p["Edge"])+s*k*mpf(p["Width"]) > 0]
    for E in energies:
        E_ = mpf(E)
        v = transform(f, E_, breaks, mpf(einf))
        inputs = "; ".join(f"{k}={x}" for k, x in p.items())+f"; EpsInf={einf}; E={E}"
        print(f"eps1 {name},{inputs},{nstr(v, 14)},1,{float(3e-13*max(1, abs(v))):.1e},computed,principal value by quadrature with 30 digits; tolerance 3e-13 of the value or of 1 for double precision")

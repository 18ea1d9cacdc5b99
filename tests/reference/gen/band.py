"""Pointwise 95 % bands of fitted curves by the delta method, with 50 digits: hp.py's least squares, derivatives of
the curve by central differences at 1e-20, t quantile of hp.py. Run in this folder: python3 band.py"""
import csv, json
from hp import *

def table(name, x, y, keep=lambda r: True):
    rows = [r for r in csv.DictReader(open('../data/' + name)) if keep(r)]
    return [r[x] for r in rows], [r[y] for r in rows]

def g(x, L, n):
    return M(0) if x == 0 else 1 / (1 + mp.power(10, n * (L - mp.log10(x))))
def unit(th, x): return th[0] + (th[1] - th[0]) * g(x, th[2], M(1))
def richards(th, x):
    b, e, L, n, s = th
    if x == 0: return b
    return b + (e - b) / mp.power(1 + (mp.power(2, 1 / s) - 1) * mp.power(10, n * (L - mp.log10(x))), s)
def biphasic(th, x):
    b, e, f, L1, L2 = th
    return b + (e - b) * (f * g(x, L1, M(1)) + (1 - f) * g(x, L2, M(1)))
def bell(th, x):
    b, e1, L1, n1, e2, L2, n2 = th
    return b + e1 * g(x, L1, n1) + e2 * g(x, L2, n2)
def linear(th, x): return th[0] + th[1] * x
def constant(th, x): return th[0]

def grad(f, th, x, free):
    out = []
    for j in free:
        h = H * (abs(th[j]) if th[j] != 0 else M(1))
        up = list(th); up[j] += h
        dn = list(th); dn[j] -= h
        out.append((f(up, x) - f(dn, x)) / (2 * h))
    return mp.matrix(out)

def case(id, model, f, start, X, Y, at, W=None, free=None, **more):
    r = stats(fit(f, start, X, Y, W=W, free=free))
    t = t_975(r['df'])
    band = []
    for c in at:
        x = M(str(c)); d = grad(f, r['theta'], x, r['free'])
        half = t * mp.sqrt((d.T * r['cov'] * d)[0])
        y = f(r['theta'], x)
        band.append(dict(concentration=float(c), response=s(y), low=s(y - half), high=s(y + half)))
    print(id, [s(v) for v in r['theta']], 'rss', s(r['rss']))
    return dict(id=id, model=model, df=r['df'], rss=s(r['rss']), points=[[float(x), float(y)] for x, y in zip(X, Y)],
                weights=None if W is None else [s(M(str(w)) if not isinstance(w, mp.mpf) else w) for w in W], band=band, **more)

def t_975(df):
    """Quantile 0.975 of Student's t: root of the regularised incomplete beta function."""
    tail = lambda t: mp.betainc(M(df) / 2, M(1) / 2, 0, df / (df + t * t), regularized=True) / 2 - M('0.025')
    return mp.findroot(tail, M('2.2'))

NM = ['0', '1e-10', '1e-09', '3e-08', '1e-07', '2e-07', '1e-06', '3e-05', '1e-03']
OD = ['0', '0.01', '0.1', '1', '4.5', '12.5', '100']
cases = []
X, Y = table('noisy_inhib4.csv', 'conc_M', 'rate_bpm')
cases.append(case('hill', 'hill', hill4, [277, 93, -6.7, 1.2], X, Y, NM))
cases.append(case('hill_unit_slope', 'hill_unit_slope', unit, [277, 93, -6.7], X, Y, NM))
cases.append(case('linear', 'linear', linear, [250, -1e6], X, Y, NM))
cases.append(case('constant', 'constant', constant, [200], X, Y, NM))
D, O = table('dnase_run1.csv', 'conc', 'density')
cases.append(case('hill_weighted', 'hill', hill3, [2.2, .58, 1.01], D, O, OD, W=[1 / M(y) for y in O], fixed_basal=0.0))
cases.append(case('richards', 'richards', richards, [0, 2.3, .63, 1, .89], D, O, OD))
B, Z = table('biphasic_reps.csv', 'conc_M', 'y')
cases.append(case('biphasic', 'biphasic', biphasic, [0, 103, .46, -8.35, -6], B, Z,
                  ['0', '1e-10', '4e-09', '1e-07', '1e-06', '1e-04'], free=[1, 2, 3, 4], fixed_basal=0.0))
# The noise-free bell with residuals added by hand: two decimals, mean about 0.
E, Q = table('exact_bell.csv', 'conc_M', 'y')
OFF = ['0.42', '-0.61', '0.18', '0.73', '-0.35', '-0.52', '0.66', '0.11', '-0.47', '0.29', '-0.14', '-0.38', '0.55', '0.07', '-0.26']
Q = [mp.nstr(M(q) + M(o), 17) for q, o in zip(Q, OFF)]
cases.append(case('bell', 'bell', bell, [100, 80, -8, 1, -110, -5.5, 1.5], E, Q, ['0', '1e-10', '2e-09', '3e-08', '4e-07', '6e-06', '1e-04']))
json.dump(dict(title='pointwise 95 % bands of fitted curves (delta method)',
               source='data: noisy_inhib4, dnase_run1 (Davidian & Giltinan 1995), biphasic_reps, exact_bell with residuals added by hand; '
                      'method: Bates DM, Watts DG (1988) Nonlinear Regression Analysis and Its Applications, section 2.3.2',
               software='mpmath ' + mp.__version__ + ', 50 digits (gen/band.py with gen/hp.py), Python 3.11',
               tolerance=dict(rule='limits within 1e-5 of the half-width', why='estimates of the program are held to 1e-5 of their standard error'),
               cases=cases), open('../data/fit_band.json', 'w'), indent=1)

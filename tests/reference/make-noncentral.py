# Writes data/noncentral.json: gamma, beta and noncentral tails by mpmath with 60 digits (plain sums
# from j = 0 of the Poisson mixture), cross-checked against SciPy. Run: python3 make-noncentral.py
import json
import os

import mpmath as mp
import scipy.stats as st

mp.mp.dps = 60


def s(x):
    return float(mp.nstr(x, 17))


def beta_tail(a, b, x):
    """I_x(a, b) by a hypergeometric series with positive terms."""
    return x**a * (1 - x) ** b / (a * mp.beta(a, b)) * mp.hyp2f1(a + b, 1, a + 1, x)


def mixture(ncp, tail):
    """Sum of Poisson weights times tail(j), to 1e-40 of itself."""
    mean = mp.mpf(ncp) / 2
    total, j, weight = mp.mpf(0), 0, mp.exp(-mean)
    while True:
        total += weight * tail(j)
        j += 1
        weight *= mean / j
        if j > mean and weight < mp.mpf(10) ** -40 * total:
            return total


def gamma_tails(a, x):
    a, x = mp.mpf(a), mp.mpf(x)
    return mp.gammainc(a, 0, x, regularized=True), mp.gammainc(a, x, mp.inf, regularized=True)


cases = {}
cases['gamma'] = []
for shape, rate, x in [(0.01, 1, 1e-20), (0.01, 1, 3), (0.35, 2, 0.4), (1, 0.5, 90), (3.7, 1.3, 2.2), (45.5, 10, 2), (800, 2, 470)]:
    l, u = gamma_tails(shape, mp.mpf(x) * mp.mpf(rate))
    cases['gamma'].append({'shape': shape, 'rate': rate, 'x': x, 'lower': s(l), 'upper': s(u)})
    assert abs(st.gamma.cdf(x, shape, scale=1 / rate) - float(l)) < 1e-9
cases['beta'] = []
for a, b, x in [(0.01, 0.02, 1e-9), (0.01, 0.02, 0.75), (0.5, 0.5, 0.3), (1, 1, 0.125), (2.5, 7.25, 0.01), (2.5, 7.25, 0.9375), (17, 8, 0.5), (17, 8, 0.984375), (350.5, 1200, 0.1875), (350.5, 1200, 0.265625)]:
    am, bm, xm = mp.mpf(a), mp.mpf(b), mp.mpf(x)
    l, u = beta_tail(am, bm, xm), beta_tail(bm, am, 1 - xm)
    assert abs(l + u - 1) < 1e-40 and abs(st.beta.cdf(x, a, b) - float(l)) < 1e-9
    cases['beta'].append({'a': a, 'b': b, 'x': x, 'lower': s(l), 'upper': s(u)})
cases['noncentralChiSquare'] = []
for df, ncp, x in [(0.5, 0.2, 0.1), (1, 1, 0.004), (1, 9, 40), (3, 4, 10), (2.3, 0.01, 8), (7.7, 30, 5), (7.7, 30, 120), (20, 100, 118), (4, 400, 250), (4, 400, 600), (60.5, 2, 200), (1, 2500, 2600)]:
    h = mp.mpf(df) / 2
    l = mixture(ncp, lambda j: gamma_tails(h + j, mp.mpf(x) / 2)[0])
    u = mixture(ncp, lambda j: gamma_tails(h + j, mp.mpf(x) / 2)[1])
    assert abs(l + u - 1) < 1e-30, (df, ncp, x)
    assert abs(st.ncx2.cdf(x, df, ncp) - float(l)) < 1e-8, (df, ncp, x)
    cases['noncentralChiSquare'].append({'df': df, 'ncp': ncp, 'x': x, 'lower': s(l), 'upper': s(u)})
cases['noncentralF'] = []
for df1, df2, ncp, x in [(2, 30, 4, 3), (3, 57, 9.5, 2.5), (1.7, 33.1, 2.2, 1.8), (4, 20, 0.5, 5), (1, 10, 25, 0.02), (1, 10, 25, 300), (0.5, 0.7, 3, 2), (3, 12, 60, 4), (2.4, 85.5, 14, 25), (5, 4000, 300, 58), (2, 3, 800, 90), (9, 9, 0, 1)]:
    r = mp.mpf(df1) * mp.mpf(x) / mp.mpf(df2)
    z, b = r / (1 + r), mp.mpf(df2) / 2
    l = mixture(ncp, lambda j: beta_tail(mp.mpf(df1) / 2 + j, b, z))
    u = mixture(ncp, lambda j: beta_tail(b, mp.mpf(df1) / 2 + j, 1 - z))
    assert abs(l + u - 1) < 1e-30, (df1, df2, ncp, x)
    if ncp > 0:
        assert abs(st.ncf.cdf(x, df1, df2, ncp) - float(l)) < 1e-7, (df1, df2, ncp, x)
    cases['noncentralF'].append({'df1': df1, 'df2': df2, 'ncp': ncp, 'x': x, 'lower': s(l), 'upper': s(u)})

source = 'mpmath 1.3, 60 digits, cross-checked against SciPy 1.17.1 gamma, beta, ncx2 and ncf cdf (make-noncentral.py)'
target = os.path.join(os.path.dirname(os.path.abspath(__file__)), 'data', 'noncentral.json')
with open(target, 'w') as f:
    json.dump({'source': source, 'cases': cases}, f, indent='\t')
    f.write('\n')

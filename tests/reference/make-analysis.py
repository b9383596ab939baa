# Writes data/analysis.json: tests of the analysis part by SciPy 1.17.1 and plain numpy least squares.
# Run: python3 tests/reference/make-analysis.py
import json
import os

import numpy as np
import scipy
import scipy.stats as st

here = os.path.dirname(os.path.abspath(__file__))
sheet = json.load(open(os.path.join(here, 'data', 'reference-values.json')))
rng = np.random.default_rng(20270311)
out = {'source': f'SciPy {scipy.__version__}, numpy {np.__version__} (make-analysis.py)'}


def test(r, level=0.95):
    ci = r.confidence_interval(level)
    return {'t': r.statistic, 'df': float(r.df), 'p': r.pvalue, 'lower': ci.low, 'upper': ci.high}


a = np.round(rng.normal(10, 2, 9), 2)
b = np.round(rng.normal(12, 3, 14), 2)
c = np.round(rng.normal(11, 1, 6), 2)
out['groups'] = [x.tolist() for x in (a, b, c)]
out['oneSample'] = test(st.ttest_1samp(a, 9.5))
out['paired'] = test(st.ttest_rel(b[:9], a))
out['pooled'] = test(st.ttest_ind(a, b))
out['welch'] = test(st.ttest_ind(a, b, equal_var=False), 0.9)
f = st.f_oneway(a, b, c)
w = st.f_oneway(a, b, c, equal_var=False)
out['oneWay'] = {'f': f.statistic, 'p': f.pvalue, 'welchF': w.statistic, 'welchP': w.pvalue}
out['fisher'] = st.fisher_exact([[3, 11], [10, 4]]).pvalue

# Analysis of covariance: F tests by numpy.linalg.lstsq on nested models.
y, x, g = [], [], []
for k, (n, shift) in enumerate([(8, 0.0), (11, 0.7), (6, -0.4)]):
    xi = np.round(rng.normal(5, 1.5, n), 2)
    y += np.round(2 + shift + 0.6 * xi + rng.normal(0, 0.8, n), 2).tolist()
    x += xi.tolist()
    g += [k] * n
y, x, g = np.array(y), np.array(x), np.array(g)
D = np.array([(g == 1), (g == 2)], float).T
one = np.ones((len(y), 1))
X = x[:, None]


def rss(M):
    beta, *_ = np.linalg.lstsq(M, y, rcond=None)
    return float(((y - M @ beta) ** 2).sum()), beta


full = np.hstack([one, D, X])
r, beta = rss(full)
df = len(y) - 4
s2 = r / df
se = np.sqrt(np.diag(s2 * np.linalg.inv(full.T @ full)))
bent = np.hstack([full, D * X])
rb, _ = rss(bent)
fg = (rss(np.hstack([one, X]))[0] - r) / 2 / s2
fx = (rss(np.hstack([one, D]))[0] - r) / s2
fs = (r - rb) / 2 / (rb / (df - 2))
out['ancova'] = {
    'y': y.tolist(), 'x': x.tolist(), 'group': g.tolist(), 'df': df,
    'groupF': fg, 'groupP': st.f.sf(fg, 2, df), 'covariateF': fx, 'slopesF': fs, 'slopesP': st.f.sf(fs, 2, df - 2),
    'difference': beta[1:3].tolist(), 'standardError': se[1:3].tolist(),
    'adjustedMean': float(beta[0] + beta[3] * x.mean()),
}

# Mixed analysis of variance of the growth data: four ages within, sex between (16 and 11 children).
rows = np.array(sheet['datasets']['orthodont']['rows'])
ids = sorted(set(rows[:, 2]))
Y = np.array([[rows[(rows[:, 2] == i) & (rows[:, 1] == age)][0, 0] for age in (8, 10, 12, 14)] for i in ids])
sex = np.array([int(rows[rows[:, 2] == i][0, 3]) for i in ids])
n, m, k = len(Y), 4, 2
resid = Y - np.array([Y[sex == s].mean(0) for s in (0, 1)])[sex]
S = resid.T @ resid / (n - k)
Pm = np.eye(m) - 1 / m
C = Pm @ S @ Pm
eps = np.trace(C) ** 2 / ((m - 1) * np.trace(C @ C))
mse = np.trace(C) / (m - 1)
# Type III by least squares on sum-to-zero columns, person means taken away for the effects within.
e = np.where(sex == 1, 1.0, -1.0)
T = np.vstack([np.eye(m - 1), -np.ones(m - 1)])
yy = (Y - Y.mean(1, keepdims=True)).ravel()
W = np.tile(T, (n, 1))
WI = W * np.repeat(e, m)[:, None]


def rss_of(M):
    beta, *_ = np.linalg.lstsq(M, yy, rcond=None)
    return float(((yy - M @ beta) ** 2).sum())


both = rss_of(np.hstack([W, WI]))
f_within = (rss_of(WI) - both) / (m - 1) / mse
f_inter = (rss_of(W) - both) / (m - 1) / mse
mean = Y.mean(1)
f_between = st.f_oneway(mean[sex == 0], mean[sex == 1]).statistic
df2 = (n - k) * (m - 1)
out['mixed'] = {
    'people': [{'group': int(s), 'values': v.tolist()} for s, v in zip(sex, Y)],
    'between': f_between, 'betweenP': st.f.sf(f_between, 1, n - k),
    'within': f_within, 'interaction': f_inter, 'interactionP': st.f.sf(f_inter, m - 1, df2),
    'interactionGg': st.f.sf(f_inter, eps * (m - 1), eps * df2), 'epsilon': eps,
}
with open(os.path.join(here, 'data', 'analysis.json'), 'w') as file:
    json.dump(out, file, indent='\t')
    file.write('\n')
print({k: v for k, v in out['mixed'].items() if k != 'people'})

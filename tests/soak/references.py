"""Reference values of distributions, smoothing, Welch's test and planning from scipy and numpy, as JSON on standard output."""
import json

import numpy as np
import scipy
from scipy import linalg, signal, special, stats

speed = [10 + 0.41 * i - 0.003 * i * i + 0.05 * np.sin(7.0 * i) for i in range(40)]
torque = [300 + 3.0 * np.sin(i / 6) + 0.4 * np.cos(11.0 * i) for i in range(48)]
first = [148.2, 147.6, 148.9, 147.9, 148.4, 147.1, 148.8]
second = [150.1, 149.2, 150.8, 149.9, 150.3]


def whittaker(y, penalty, order):
    difference = np.diff(np.eye(len(y)), order, axis=0)
    return linalg.solve(np.eye(len(y)) + penalty * difference.T @ difference, np.asarray(y), assume_a="pos")


def power(n, delta, alpha=0.05):
    df, shift = 2 * n - 2, delta * np.sqrt(n / 2)
    bound = stats.t.ppf(1 - alpha / 2, df)
    return 1 - stats.nct.cdf(bound, df, shift) + stats.nct.cdf(-bound, df, shift)


def runs_a_side(delta, wanted):
    return next(n for n in range(2, 10_000) if power(n, delta) >= wanted)


def rows(function, arguments):
    return [[*given, float(function(*given))] for given in arguments]


welch = stats.ttest_ind(second, first, equal_var=False)
shares = [np.var(group, ddof=1) / len(group) for group in (first, second)]
# scipy before 1.11 does not state the degrees of freedom: Satterthwaite's formula.
freedom = sum(shares) ** 2 / sum(share**2 / (len(group) - 1) for share, group in zip(shares, (first, second)))
pooled = stats.ttest_ind(second, first)
values = {
    "versions": {"scipy": scipy.__version__, "numpy": np.__version__},
    "log_gamma": rows(special.gammaln, [(x,) for x in (0.1, 0.5, 1.5, 4.0, 17.25, 120.0, 1e4)]),
    "incomplete_beta": rows(
        lambda x, a, b: special.betainc(a, b, x),
        [(x, a, b) for x in (0.001, 0.2, 0.55, 0.98) for a, b in ((0.5, 0.5), (2.0, 7.5), (30.0, 4.0), (100.0, 120.0))],
    ),
    "normal_cdf": rows(stats.norm.cdf, [(x,) for x in (-12.0, -6.5, -2.2, -0.01, 0.7, 2.9, 5.5)]),
    "normal_quantile": rows(stats.norm.ppf, [(p,) for p in (1e-14, 1e-5, 0.02, 0.4, 0.6, 0.95, 0.99999)]),
    "t_cdf": rows(stats.t.cdf, [(t, df) for t in (-40.0, -3.1, -0.2, 1.4, 6.0) for df in (1.0, 2.5, 8.934, 60.0)]),
    "t_quantile": rows(stats.t.ppf, [(p, df) for p in (1e-8, 0.005, 0.2, 0.8, 0.975, 0.9995) for df in (1.0, 3.0, 8.934, 136.875)]),
    "noncentral_t_cdf": rows(
        stats.nct.cdf, [(t, df, d) for t in (-1.5, 0.4, 2.3, 6.0) for df, d in ((4.0, 0.5), (10.0, 2.0), (34.0, 3.5))]
    ),
    "runs_a_side": [[d, p, int(runs_a_side(d, p))] for d in (0.6, 0.75, 1.2, 1.8, 2.5) for p in (0.8, 0.9)],
    "speed": speed,
    "savitzky_golay": [
        [w, o, d, *signal.savgol_filter(speed, w, o, deriv=d, delta=0.04)]
        for w, o, d in ((5, 2, 0), (7, 2, 1), (11, 3, 1), (21, 3, 1), (15, 4, 2))
    ],
    "torque": torque,
    "whittaker": [[p, o, *whittaker(torque, p, o)] for p, o in ((3.0, 1), (50.0, 2), (2000.0, 3))],
    "first": first,
    "second": second,
    "welch": [welch.statistic, getattr(welch, "df", freedom), welch.pvalue],
    "pooled": [pooled.statistic, len(first) + len(second) - 2, pooled.pvalue],
}
print(json.dumps(values, default=float))

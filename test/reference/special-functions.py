"""Writes special-functions.json: mpmath at 40 or more digits, SciPy for Student and beta quantiles.

Run: python3 special-functions.py > special-functions.json   (needs mpmath and SciPy; the tests need neither)
"""
import json
import mpmath as mp
import scipy
import scipy.special as sp
import scipy.stats as st

mp.mp.dps = 40


def text(value):
    return float(mp.nstr(value, 17))


def log_tails(a, x):
    """ln P and ln Q of the regularised incomplete gamma: positive series for P at enough digits for 1 - P."""
    with mp.workdps(620):
        a, x = mp.mpf(a), mp.mpf(x)
        term = total = mp.mpf(1)
        n = 0
        while term > total * mp.mpf(10) ** -610:
            n += 1
            term *= x / (a + n)
            total += term
        p = total * mp.exp(a * mp.log(x) - x - mp.loggamma(a + 1))
        return text(mp.log(p)), text(mp.log(1 - p))


gamma = [[x, text(mp.log(abs(mp.gamma(mp.mpf(x)))) if x < 1e5 else mp.loggamma(mp.mpf(x)))]
         for x in [1e-10, 0.1, 0.3, 0.5, 0.7, 0.999, 1 + 1e-9, 1.0001, 1.3, 1.5, 1.7, 1.999999, 2.0000001, 2.4, 3,
                   7.7, 20, 170.3, 1e4, 1e8, -0.5, -1.0001, -7.9999, -100.3]]
tails = []
for a in [0.1, 0.5, 1, 2.5, 10, 19.9, 20.1, 100, 1e4, 1e6]:
    for ratio in [1e-6, 0.01, 0.3, 0.8, 0.95, 1, 1.05, 1.3, 3, 10]:
        if a >= 1e4 and not (0.9 < ratio < 1.1) or a == 100 and ratio > 4:
            continue
        tails.append([a, a * ratio, *log_tails(a, a * ratio)])
integral = [[p, x, text(mp.log(mp.expint(mp.mpf(p), mp.mpf(x))))]
            for p in [-5.3, -1, 0, 0.2, 0.49, 0.5, 0.51, 0.9, 0.999999, 1, 1 + 1e-12, 1.000001, 1.05, 1.3, 1.5,
                      1.500001, 2, 2.5, 3.3, 6, 8]
            for x in [1e-100, 1e-20, 1e-12, 1e-6, 1e-3, 0.1, 0.7, 1.4999, 1.51, 3, 20, 600]]
erfc = [[x, text(mp.erfc(mp.mpf(x)))] for x in [-5, -1, -0.1, 0, 1e-8, 0.1, 1, 1.2, 1.3, 2, 5, 10, 26]]
mills = []
for z in [-100, -5, -1, 0, 0.5, 1.7, 1.74, 3, 10, 1e3, 1e6]:
    z = mp.mpf(z)
    mills.append([float(z), text(mp.log(mp.erfc(z / mp.sqrt(2)) / 2) + z * z / 2 + mp.log(2 * mp.pi) / 2)])
quantile = []
for p in [1e-300, 1e-20, 1e-5, 0.025, 0.3, 0.5, 0.7, 0.975, 0.999999]:
    start = float(st.norm.ppf(p))
    quantile.append([p, text(mp.findroot(lambda z: mp.log(mp.erfc(-z / mp.sqrt(2)) / 2) - mp.log(mp.mpf(p)), start))])
poisson = [[k, mean, text(k * mp.log(mp.mpf(mean)) - mp.mpf(mean) - mp.loggamma(k + 1))]
           for k, mean in [(0, 0.3), (1, 1e-9), (5, 5), (25, 10.5), (100, 250.25), (10000, 10100.5), (10 ** 6, 999000.5)]]
beta = [[a, b, x, float(sp.betainc(a, b, x))]
        for a, b, x in [(0.5, 0.5, 0.1), (2, 3, 0.4), (10, 90, 0.12), (0.3, 7, 1e-6), (300, 200, 0.55), (5, 1, 0.999),
                        (30000, 30000, 0.5), (30000, 20000, 0.6)]]
beta_inverse = [[a, b, p, float(sp.betaincinv(a, b, p))]
                for a, b, p in [(1, 60, 0.025), (3, 8, 0.025), (4, 7, 0.975), (0.5, 0.5, 0.2), (500, 400, 0.01)]]
student = [[p, df, float(st.t.ppf(p, df))]
           for p in [0.6, 0.8, 0.975, 0.9995, 0.001] for df in [1, 2, 3.5, 19, 200]]
chi_square = [[p, df, float(st.chi2.ppf(p, df))]
              for p in [1e-6, 0.01, 0.5, 0.6827, 0.95, 0.999, 1 - 1e-9] for df in [1, 2, 3, 10, 100]]
clopper = []
for x, n in [(0, 20), (1, 20), (7, 20), (20, 20), (263, 312), (4, 60000)]:
    exact = st.binomtest(x, n).proportion_ci(0.95, "exact")
    score = st.binomtest(x, n).proportion_ci(0.95, "wilson")
    clopper.append([x, n, exact.low, exact.high, score.low, score.high])

json.dump({
    "source": "Definitions: NIST DLMF 5.2, 6.2, 7.2, 8.2, 8.17, 8.19. Values computed here.",
    "how": f"special-functions.py: mpmath {mp.__version__} at 40 digits (620 for the tails); SciPy {scipy.__version__} "
           "for betaIncomplete, betaInverse, student, chiSquare, binomialLimits (binomtest.proportion_ci, exact and wilson, 95 %)",
    "lnGamma": gamma, "lnGammaPQ": tails, "lnExpIntegral": integral, "erfc": erfc, "lnMills": mills,
    "normalQuantile": quantile, "lnPoisson": poisson, "betaIncomplete": beta, "betaInverse": beta_inverse,
    "student": student, "chiSquare": chi_square, "binomialLimits": clopper,
}, __import__("sys").stdout, indent=None, separators=(",", ":"))
print()

"""Writes laws.json: ln f and ln S of the six dwell-time laws, each given t >= shortest.

Run: python3 laws.py > laws.json   (needs mpmath and SciPy; the tests need neither)

SciPy where it has the law and keeps its digits (pareto, expon, lognorm, weibull_min: logpdf and logsf, minus logsf of
the shortest duration); mpmath at 60 digits for the cutoff forms and for parameters run off towards a power law.
"""
import json
import sys
import mpmath as mp
import scipy
import scipy.stats as st

mp.mp.dps = 60
TIMES = [1, 1.0001, 1.5, 3, 10, 100, 1000]  # in units of the shortest duration
rows = []


def row(by, law, coordinates, shortest, density, survival):
    for ratio in TIMES:
        t = shortest * ratio
        values = [float(density(t)), float(survival(t))]
        # A survival below what doubles hold is not compared.
        if values[1] > -700:
            rows.append({"by": by, "law": law, "coordinates": coordinates, "shortest": shortest, "t": t,
                         "lnDensity": values[0], "lnSurvival": values[1]})


def scipy_row(law, coordinates, shortest, frozen):
    tail = frozen.logsf(shortest)
    row("SciPy", law, coordinates, shortest, lambda t: frozen.logpdf(t) - tail, lambda t: frozen.logsf(t) - tail)


def mp_row(law, coordinates, shortest, density, survival):
    tail = survival(mp.mpf(shortest))
    row("mpmath", law, coordinates, shortest, lambda t: mp.log(density(mp.mpf(t))) - mp.log(tail),
        lambda t: mp.log(survival(mp.mpf(t))) - mp.log(tail))


for alpha in [1.02, 1.5, 2.7]:
    scipy_row("power", [alpha], 0.03, st.pareto(alpha - 1, scale=0.03))
for rate in [0.2, 15]:
    scipy_row("exponential", [rate], 0.02, st.expon(scale=1 / rate))
for ln_median, sigma in [(-1, 0.7), (1.5, 2)]:
    scipy_row("log-normal", [ln_median, sigma], 0.03, st.lognorm(sigma, scale=float(mp.exp(ln_median))))
for ln_tau, beta in [(-2, 1), (0.5, 0.4), (-1, 2.5)]:
    scipy_row("stretched", [ln_tau, beta], 0.03, st.weibull_min(beta, scale=float(mp.exp(ln_tau))))

for ln_median, sigma in [(-30, 4), (-500, 30)]:
    mp_row("log-normal", [ln_median, sigma], 0.03,
           lambda t: mp.npdf((mp.log(t) - ln_median) / sigma) / (sigma * t),
           lambda t: mp.erfc((mp.log(t) - ln_median) / sigma / mp.sqrt(2)) / 2)
for ln_tau, beta in [(-40, 0.1), (-500, 0.02)]:
    ln_scale, b = mp.mpf(ln_tau), mp.mpf(beta)
    mp_row("stretched", [ln_tau, beta], 0.03,
           lambda t: b / t * mp.exp(b * (mp.log(t) - ln_scale)) * mp.exp(-mp.exp(b * (mp.log(t) - ln_scale))),
           lambda t: mp.exp(-mp.exp(b * (mp.log(t) - ln_scale))))
for alpha, kappa in [(1.5, 0.2), (1.0, 0.5), (1.02, 1e-6), (2.4, 30), (1.6, 0)]:
    a, k = mp.mpf(alpha) - 1, mp.mpf(kappa)
    mp_row("power-cutoff-survival", [alpha, kappa], 0.03,
           lambda t: (a / t + k) * t ** -a * mp.exp(-k * t), lambda t: t ** -a * mp.exp(-k * t))
for alpha, kappa in [(1.5, 0.2), (1.0, 0.5), (1.02, 1e-9), (2.4, 30), (0.3, 2), (-1, 5), (-0.5, 200), (5.5, 0.1), (1.5, 1e-13)]:
    al, k = mp.mpf(alpha), mp.mpf(kappa)
    mp_row("power-cutoff-density", [alpha, kappa], 0.03,
           lambda t: t ** -al * mp.exp(-k * t), lambda t: t ** (1 - al) * mp.expint(al, k * t))

json.dump({
    "source": "Definitions: Johnson, Kotz and Balakrishnan, Continuous Univariate Distributions, Wiley (1994); "
              "NIST DLMF 8.19 for the cutoff of the density. Values computed here.",
    "how": f"laws.py: SciPy {scipy.__version__} and mpmath {mp.__version__} at 60 digits, as each row says",
    "rows": rows,
}, sys.stdout, separators=(",", ":"))
print()

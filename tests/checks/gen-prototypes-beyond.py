"""prototypes-beyond.json: elliptic, Linkwitz-Riley, orders 11 to 20 and the frequency transformations.

Run in this folder:  python3 gen-prototypes-beyond.py > prototypes-beyond.json
Needs Python 3.11 or newer with NumPy, SciPy and mpmath (Debian: python3-numpy python3-scipy python3-mpmath).
"""

import json
import math
import platform

import mpmath as mp
import numpy as np
import scipy
from scipy import signal
from scipy.optimize import brentq

HALF = "half-power at 1 rad/s"
RIPPLE = "ripple edge at 1 rad/s"
STOP = "stop-band edge at 1 rad/s"
OMEGA = [0.1, 0.5, 0.9, 1.0, 1.1, 1.5, 2.0, 3.0]


def digits(values):
    return [float(f"{v:.13g}") + 0.0 for v in values]


def vector(values):
    values = np.asarray(values, complex)
    return {"re": digits(values.real), "im": digits(values.imag)}


def magnitude(z, p, k, w):
    return abs(k * np.prod([1j * w - q for q in z]) / np.prod([1j * w - q for q in p]))


def figures(z, p, k):
    mag_db = [20 * math.log10(max(magnitude(z, p, k, w), 1e-15)) for w in OMEGA]
    dc = magnitude(z, p, k, 0)
    return {"poles": vector(p), "zeros": vector(z), "gain": float(f"{np.real(k):.13g}"), "dc_gain": float(f"{dc:.13g}"),
            "H_at": {"omega": OMEGA, "mag_dB": digits(mag_db)}}


def at(z, p, k, w):
    """the same filter with what was at w moved to 1 rad/s"""
    return np.asarray(z) / w, np.asarray(p) / w, k * w ** (len(z) - len(p))


def half_power(z, p, k, lower, upper):
    return brentq(lambda w: magnitude(z, p, k, w) - math.sqrt(0.5), lower, upper, xtol=1e-15, rtol=1e-14)


def elliptic_precise(n, ripple, stop):
    """scipy.signal.ellip loses digits where 1 - k falls below 1e-7; the same by theta functions in 60 digits"""
    mp.mp.dps = 60
    e, es = (mp.sqrt(mp.mpf(10) ** (mp.mpf(a) / 10) - 1) for a in (ripple, stop))
    m1 = (e / es) ** 2
    quarter1, quarter1c = mp.ellipk(m1), mp.ellipk(1 - m1)
    q = mp.exp(-mp.pi * quarter1c / quarter1 / n)
    k = (mp.jtheta(2, 0, q) / mp.jtheta(3, 0, q)) ** 2
    quarter = mp.ellipk(k * k)
    v = mp.ellipf(mp.atan(1 / e), 1 - m1) / (n * quarter1)
    u = [mp.mpf(2 * i - 1) / n for i in range(1, n + 1)]
    p = [mp.j * mp.ellipfun("cd", (x - mp.j * v) * quarter, m=k * k) for x in u]
    z = [mp.j / (k * mp.ellipfun("cd", x * quarter, m=k * k)) for x in u if x != 1]
    gain = (1 if n % 2 else mp.mpf(10) ** (-mp.mpf(ripple) / 20)) * mp.fprod(-x for x in p)
    gain /= mp.fprod(-x for x in z)
    return [complex(x) for x in z], [complex(x) for x in p], float(gain.real)


prototypes = []
for ripple, stop in [(0.1, 40.0), (0.5, 60.0), (1.0, 40.0), (3.0, 80.0), (0.01, 100.0), (5.0, 30.0)]:
    # At 5 dB and 30 dB roots in doubles no longer hold 1e-6 dB at the edge from order 20 on.
    for order in range(1, 20 if ripple > 3 else 21):
        precise = ripple > 3 and order > 16
        z, p, k = elliptic_precise(order, ripple, stop) if precise else signal.ellip(order, ripple, stop, 1, analog=True, output="zpk")
        entry = {"family": "elliptic", "order": order, "ripple_dB": ripple, "stop_dB": stop}
        prototypes.append({**entry, "normalisation": RIPPLE, **figures(z, p, k)})
        if ripple > 3.02 or order > 10:
            continue
        w = half_power(z, p, k, 1.0, min((abs(q) for q in z), default=1e3))
        prototypes.append({**entry, "normalisation": HALF, **figures(*at(z, p, k, w))})
for order in range(2, 21, 2):
    z, p, k = signal.butter(order // 2, 1, analog=True, output="zpk")
    p = np.repeat(p, 2)
    prototypes.append({"family": "linkwitz-riley", "order": order, "normalisation": "half-amplitude at 1 rad/s", **figures(z, p, k * k)})
    w = half_power(z, p, k * k, 0.5, 1.0)
    prototypes.append({"family": "linkwitz-riley", "order": order, "normalisation": HALF, **figures(*at(z, p, k * k, w))})
for order in range(11, 21):
    prototypes.append({"family": "butterworth", "order": order, "normalisation": HALF,
                       **figures(*signal.butter(order, 1, analog=True, output="zpk"))})
    prototypes.append({"family": "chebyshev1", "order": order, "ripple_dB": 0.5, "normalisation": RIPPLE,
                       **figures(*signal.cheby1(order, 0.5, 1, analog=True, output="zpk"))})
    prototypes.append({"family": "chebyshev2", "order": order, "stop_dB": 60.0, "normalisation": STOP,
                       **figures(*signal.cheby2(order, 60, 1, analog=True, output="zpk"))})
    for norm, words in [("phase", "phase-normalised (same high-frequency asymptote as Butterworth)"),
                        ("delay", "unit group delay at DC"), ("mag", HALF)]:
        prototypes.append({"family": "bessel", "order": order, "normalisation": words,
                           **figures(*signal.bessel(order, 1, analog=True, output="zpk", norm=norm))})

TAU = 2 * math.pi
low_passes = [
    ({"family": "butterworth", "order": 1}, signal.butter(1, 1, analog=True, output="zpk")),
    ({"family": "butterworth", "order": 4}, signal.butter(4, 1, analog=True, output="zpk")),
    ({"family": "chebyshev1", "order": 5, "ripple_dB": 0.5}, signal.cheby1(5, 0.5, 1, analog=True, output="zpk")),
    ({"family": "chebyshev2", "order": 4, "stop_dB": 40.0}, signal.cheby2(4, 40, 1, analog=True, output="zpk")),
    ({"family": "elliptic", "order": 3, "ripple_dB": 0.5, "stop_dB": 50.0}, signal.ellip(3, 0.5, 50, 1, analog=True, output="zpk")),
    ({"family": "elliptic", "order": 6, "ripple_dB": 0.1, "stop_dB": 60.0}, signal.ellip(6, 0.1, 60, 1, analog=True, output="zpk")),
    ({"family": "bessel", "order": 7}, signal.bessel(7, 1, analog=True, output="zpk", norm="mag")),
]
BANDS = [(900.0, 1100.0), (300.0, 3400.0), (49.9, 50.1), (20.0, 20000.0)]
transformed = []


def transform(entry, kind, edges, zpk):
    z, p, k = zpk
    centre = math.sqrt(np.prod(np.atleast_1d(edges)))
    hz = [centre * f for f in (0.1, 0.5, 0.97, 1.03, 2.0, 10.0)]
    mag_db = [20 * math.log10(max(abs(signal.freqs_zpk(z, p, k, [TAU * f])[1][0]), 1e-15)) for f in hz]
    transformed.append({**entry, "type": kind, "edges_Hz": edges, "poles": vector(p), "zeros": vector(z),
                        "gain": float(f"{np.real(k):.13g}"), "H_at": {"frequency_Hz": hz, "mag_dB": digits(mag_db)}})


for entry, zpk in low_passes:
    transform(entry, "low-pass", 1234.5, signal.lp2lp_zpk(*zpk, TAU * 1234.5))
    transform(entry, "high-pass", 0.1, signal.lp2hp_zpk(*zpk, TAU * 0.1))
    for f1, f2 in BANDS:
        transform(entry, "band-pass", [f1, f2], signal.lp2bp_zpk(*zpk, TAU * math.sqrt(f1 * f2), TAU * (f2 - f1)))
        transform(entry, "band-stop", [f1, f2], signal.lp2bs_zpk(*zpk, TAU * math.sqrt(f1 * f2), TAU * (f2 - f1)))

versions = f"SciPy {scipy.__version__}, NumPy {np.__version__}, mpmath {mp.__version__}, Python {platform.python_version()}"
header = {
    "what": "elliptic and Linkwitz-Riley low-pass prototypes, the other families at orders 11 to 20, frequency transformations",
    "source": "scipy.signal ellip, butter, cheby1, cheby2, bessel (analog=True, output zpk), lp2lp_zpk, lp2hp_zpk, lp2bp_zpk, "
              "lp2bs_zpk; Linkwitz-Riley: the poles of scipy.signal.butter of half the order, each twice; half-power edges by "
              "scipy.optimize.brentq on |H|; elliptic above order 16 with 5 dB and 30 dB: theta functions of mpmath in 60 digits",
    "generator": f"python3 gen-prototypes-beyond.py > prototypes-beyond.json ({versions})",
    "units": "rad/s, prototypes normalised as they say; edges in Hz; mag_dB in dB",
    "tolerance": "poles, zeros: 1e-8 relative; gains 1e-8 relative; mag_dB: 1e-6 dB above -100 dB",
}
print('{\n"header": ' + json.dumps(header, indent=1) + ',\n"prototypes": [\n' + ",\n".join(json.dumps(e) for e in prototypes)
      + '\n],\n"transformed": [\n' + ",\n".join(json.dumps(e) for e in transformed) + "\n]\n}")

"""Fixture series-and-trend.json: zero-lag Butterworth and Theil-Sen slopes by scipy.

Run:  python3 tests/reference/series_and_trend.py > tests/reference/series-and-trend.json
(scipy 1.x with numpy; Debian: python3-scipy)
"""
import json
import numpy as np
from scipy.signal import butter, filtfilt
from scipy.stats import theilslopes

rng = np.random.default_rng(3)


def filter_case(rate, count, cutoff):
    t = np.arange(count) / rate
    values = np.round(5 + 8 * np.sin(2 * np.pi * .7 * t) + 3 * np.exp(-t) + rng.normal(0, 1.5, count), 4)
    b, a = butter(2, cutoff / .802 / (rate / 2))
    padding = min(9, count - 1)
    return {'rateHz': rate, 'cutoffHz': cutoff, 'values': values.tolist(), 'filtered': filtfilt(b, a, values, padlen=padding).round(10).tolist()}


def trend_case(count, ties):
    x = np.sort(rng.integers(0, 40, count)) if ties else np.cumsum(rng.uniform(.5, 4, count))
    y = np.round(.3 * x + rng.normal(0, 2, count), 0 if ties else 3)
    slope, intercept, low, high = theilslopes(y, x, .95)
    return {'x': np.round(x, 6).tolist(), 'y': y.tolist(), 'slope': slope, 'intercept': intercept, 'low': low, 'high': high}


def rounded(case):
    x, y = np.array(case['x']), np.array(case['y'])
    slope, intercept, low, high = theilslopes(y, x, .95)
    return {**case, 'slope': slope, 'intercept': intercept, 'low': low, 'high': high}


print(json.dumps({
    'filters': [filter_case(30, 60, 6), filter_case(29.97, 45, 3), filter_case(60, 80, 6), filter_case(30, 6, 6)],
    'trends': [rounded(trend_case(n, ties)) for n, ties in ((4, False), (9, False), (15, False), (12, True), (20, True))],
}))

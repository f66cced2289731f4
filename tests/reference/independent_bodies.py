"""An independent writing of the measure definitions, for the fixture independent-bodies.json.

Run:  python3 tests/reference/independent_bodies.py > tests/reference/independent-bodies.json
(Python 3 with numpy). It shares nothing with shared/geometry: formulas are typed from the definitions, angles come
from rotation matrices and np.angle, and each sd from central differences by every raw picture coordinate, the ends of
the plumb line and of the scale included.
"""
import json
import numpy as np

RNG = np.random.default_rng(20240607)
W, H = 1440.0, 1080.0
SIGMA = 3.0 * H / 1080.0
FACTOR = {'lateralEpicondyle': 1.3, 'acromion': 1.3, 'greaterTrochanter': 1.5}
CLOTHED = {'greaterTrochanter': 2.5}
for side in ('Left', 'Right'):
    FACTOR['acromion' + side] = 1.3
    FACTOR['asis' + side] = FACTOR['psis' + side] = 1.5
    CLOTHED['asis' + side] = CLOTHED['psis' + side] = 2.5

SAGITTAL = {
    'acromion': (0, -250), 'greaterTrochanter': (5, 10), 'lateralEpicondyle': (12, 240), 'lateralMalleolus': (0, 450),
    'fifthMetatarsal': (95, 480), 'heel': (-32, 482), 'tragus': (22, -360), 'canthus': (78, -370), 'c7': (-28, -300),
    'elbow': (10, -110), 'axilla': (0, -200), 'lowerRib': (5, -90), 'supportTop': (8, -160), 'armSupportTop': (50, -100),
    'thighTop': (30, 60), 'bodySupportBottom': (28, 35),
}
FRONTAL = {
    'acromion': (120, -250), 'asis': (75, 0), 'psis': (45, 5), 'kneeCentre': (85, 230), 'ankleCentre': (80, 450),
    'tragus': (45, -360), 'elbow': (150, -110),
}


def turn(point, angle):
    c, s = np.cos(angle), np.sin(angle)
    return np.array([[c, -s], [s, c]]) @ np.asarray(point)


def draw_body(index):
    view = ['sagittal', 'frontal-anterior', 'sagittal', 'frontal-posterior'][index % 4]
    body = {'view': view, 'width': W, 'height': H, 'landmarks': {}}
    if RNG.random() < .3:
        body['clothed'] = True
    tilt = np.radians(RNG.uniform(-6, 6))
    centre = np.array([W / 2, H / 2]) + RNG.uniform(-20, 20, 2)

    def place(name, x, y):
        at = centre + turn(np.array([x, y]) + RNG.normal(0, 14, 2), tilt)
        mark = {'x': round(float(np.clip(at[0], 0, W)), 2), 'y': round(float(np.clip(at[1], 0, H)), 2)}
        if RNG.random() < .2:
            mark['sd'] = round(float(RNG.uniform(1, 6)), 2)
        body['landmarks'][name] = mark

    if view == 'sagittal':
        facing = 1 if RNG.random() < .5 else -1
        body['facing'] = 'right' if facing == 1 else 'left'
        for name, (x, y) in SAGITTAL.items():
            place(name, facing * x, y)
    else:
        body['mirrored'] = bool(RNG.random() < .3)
        sign = (1 if view == 'frontal-anterior' else -1) * (-1 if body['mirrored'] else 1)
        names = ['acromion', 'psis' if view == 'frontal-posterior' else 'asis', 'kneeCentre', 'ankleCentre', 'tragus', 'elbow']
        for name in names:
            x, y = FRONTAL[name]
            place(name + 'Left', sign * x, y)
            place(name + 'Right', -sign * x, y)
        if index % 8 == 1:
            place('sternalNotch', 0, -230)
    if RNG.random() < .7:
        down = centre + turn((300, 400), tilt)
        up = centre + turn((300, -400), tilt)
        ends = [{'x': round(float(p[0]), 2), 'y': round(float(np.clip(p[1], 0, H)), 2)} for p in (up, down)]
        if RNG.random() < .3:
            ends.reverse()
        body['plumbLine'] = {'top': ends[0], 'bottom': ends[1]}
    if RNG.random() < .5:
        body['scale'] = {'from': {'x': 200.0, 'y': 900.0}, 'to': {'x': round(float(RNG.uniform(420, 700)), 2), 'y': 880.0}, 'lengthMm': 1000}
    return body


def bearing(v):
    """Angle of a vector (along, across): 0 along, + toward across; degrees."""
    return np.degrees(np.angle(complex(v[0], v[1])))


def wrap(angle):
    return 180.0 - (180.0 - angle) % 360.0


def measure(body, raw, roll_offset=0.0):
    """Readings from a flat dictionary of raw points: name -> np.array([x, y])."""
    if 'plumbTop' in raw:
        a, b = raw['plumbTop'], raw['plumbBottom']
        top, bottom = (a, b) if a[1] <= b[1] else (b, a)
        lean = np.angle(complex(bottom[1] - top[1], top[0] - bottom[0]))
    else:
        lean = 0.0
    lean += roll_offset
    p = {name: turn(at - np.array([W / 2, H / 2]), -lean) for name, at in raw.items()}
    mm = None
    if 'scaleFrom' in raw:
        mm = body['scale']['lengthMm'] / np.linalg.norm(raw['scaleTo'] - raw['scaleFrom'])
    return (sagittal if body['view'] == 'sagittal' else frontal)(body, p, mm)


def sagittal(body, p, mm):
    s = 1 if body['facing'] == 'right' else -1
    def forward(a, b): return s * (p[b][0] - p[a][0])
    def up(a, b): return p[a][1] - p[b][1]
    def rising(a, b): return bearing((up(a, b), forward(a, b)))
    def level(a, b): return bearing((forward(a, b), up(a, b)))
    def length(a, b): return np.linalg.norm(p[b] - p[a])
    trunk = rising('greaterTrochanter', 'acromion')
    thigh = bearing((-up('greaterTrochanter', 'lateralEpicondyle'), forward('greaterTrochanter', 'lateralEpicondyle')))
    shank = rising('lateralMalleolus', 'lateralEpicondyle')
    leg = length('greaterTrochanter', 'lateralEpicondyle') + length('lateralEpicondyle', 'lateralMalleolus')
    foot = length('heel', 'fifthMetatarsal')
    out = {
        'trunkInclination': trunk, 'thighInclination': thigh, 'shankInclination': shank,
        'hipFlexion': wrap(trunk + thigh), 'kneeFlexion': wrap(thigh + shank),
        'ankleDorsiflexion': wrap(shank + level('heel', 'fifthMetatarsal')),
        'craniovertebralAngle': level('c7', 'tragus'), 'gazeAngle': level('tragus', 'canthus'),
    }
    offsets = {
        'plumbOffset.ear': ('lateralMalleolus', 'tragus'), 'plumbOffset.acromion': ('lateralMalleolus', 'acromion'),
        'plumbOffset.greaterTrochanter': ('lateralMalleolus', 'greaterTrochanter'),
        'plumbOffset.knee': ('lateralMalleolus', 'lateralEpicondyle'), 'elbowUnderShoulder': ('acromion', 'elbow'),
    }
    for name, (a, b) in offsets.items():
        out[name] = forward(a, b) * mm if mm else 100 * forward(a, b) / leg
    parts = [
        (.0145 * 2, 'lateralMalleolus', 'fifthMetatarsal', .5), (.0465 * 2, 'lateralEpicondyle', 'lateralMalleolus', .433),
        (.1 * 2, 'greaterTrochanter', 'lateralEpicondyle', .433), (.678, 'greaterTrochanter', 'acromion', .626),
    ]
    centre = sum(m * (p[a] + f * (p[b] - p[a])) for m, a, b, f in parts)
    ahead = s * (centre[0] - p['lateralMalleolus'][0])
    out['centreOfMassOffset'] = ahead * mm if mm else 100 * ahead / foot
    if mm:
        out['axillaClearance'] = mm * up('supportTop', 'axilla')
        out['thighClearance'] = mm * up('thighTop', 'bodySupportBottom')
        out['armSupportToRib'] = mm * up('lowerRib', 'armSupportTop')
    return out


def frontal(body, p, mm):
    m = (1 if body['view'] == 'frontal-anterior' else -1) * (-1 if body['mirrored'] else 1)
    pelvis = 'psis' if body['view'] == 'frontal-posterior' else 'asis'
    def tilt(name):
        v = p[name + 'Left'] - p[name + 'Right']
        return bearing((m * v[0], -v[1]))
    def mid(name): return (p[name + 'Left'] + p[name + 'Right']) / 2
    axis = mid('acromion') - mid(pelvis)
    over = p.get('sternalNotch', mid('acromion'))
    base = p['ankleCentreLeft'] - p['ankleCentreRight']
    out = {
        'shoulderTilt': tilt('acromion'), 'pelvicTilt': tilt(pelvis), 'headTilt': tilt('tragus'),
        'trunkLean': bearing((-axis[1], m * axis[0])), 'trunkOnPelvis': wrap(tilt('acromion') - tilt(pelvis)),
        'midlineShift': m * (over[0] - mid('ankleCentre')[0]) / (abs(base[0]) / 2),
        'stanceWidthRatio': np.linalg.norm(base) / np.linalg.norm(p['acromionLeft'] - p['acromionRight']),
    }
    if body['view'] == 'frontal-anterior':
        for side, sign in (('Left', 1), ('Right', -1)):
            thigh, shank = p['kneeCentre' + side] - p['asis' + side], p['ankleCentre' + side] - p['kneeCentre' + side]
            lateral = m * sign
            out['frontalKneeAngle.' + side.lower()] = wrap(bearing((shank[1], lateral * shank[0])) - bearing((thigh[1], lateral * thigh[0])))
    return out


def spread(name, body):
    mark = body['landmarks'].get(name)
    if mark is None:
        return SIGMA
    if 'sd' in mark:
        return mark['sd']
    return SIGMA * (CLOTHED.get(name) if body.get('clothed') and name in CLOTHED else FACTOR.get(name, 1))


def bands(body, raw):
    step = 1e-3
    variance = {}
    def collect(high, low, width, sd):
        for key in high:
            slope = wrap(high[key] - low[key]) / width if abs(high[key] - low[key]) > 180 else (high[key] - low[key]) / width
            variance[key] = variance.get(key, 0) + (slope * sd) ** 2
    for name in raw:
        for axis in (0, 1):
            moved = []
            for sign in (1, -1):
                copy = {key: at.copy() for key, at in raw.items()}
                copy[name][axis] += sign * step
                moved.append(measure(body, copy))
            collect(*moved, 2 * step, spread(name, body))
    if 'plumbTop' not in raw:
        angle = np.radians(.001)
        collect(measure(body, raw, angle), measure(body, raw, -angle), 2 * angle, np.radians(2))
    return {key: float(np.sqrt(value)) for key, value in variance.items()}


def main():
    cases = []
    for index in range(60):
        body = draw_body(index)
        raw = {name: np.array([mark['x'], mark['y']]) for name, mark in body['landmarks'].items()}
        if 'plumbLine' in body:
            raw['plumbTop'] = np.array([body['plumbLine']['top'][axis] for axis in 'xy'])
            raw['plumbBottom'] = np.array([body['plumbLine']['bottom'][axis] for axis in 'xy'])
        if 'scale' in body:
            raw['scaleFrom'] = np.array([body['scale']['from'][axis] for axis in 'xy'])
            raw['scaleTo'] = np.array([body['scale']['to'][axis] for axis in 'xy'])
        values, sds = measure(body, raw), bands(body, raw)
        cases.append({'body': body, 'readings': {key: [round(float(values[key]), 6), round(sds[key], 6)] for key in values}})
    print('[\n' + ',\n'.join(json.dumps(case) for case in cases) + '\n]')


main()

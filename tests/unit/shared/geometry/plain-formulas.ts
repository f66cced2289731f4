/**
 * The definitions of the measures once more, in plain arithmetic on raw coordinates: fast, and independent of the code
 * under test. Angles in degrees. Points as [x, y] in pixels of the raw picture.
 */
export type Point = readonly [number, number]
export type Points = Readonly<Record<string, Point>>

export interface PlainBody {
  readonly points: Points
  /** s in a sagittal view, m in a frontal one. */
  readonly sign: number
  readonly rollRad: number
  readonly mmPerPx: number | null
}

const DEG = 180 / Math.PI

type At = (name: string) => Point

function uprightAt(body: PlainBody): At {
  const c = Math.cos(body.rollRad)
  const s = Math.sin(body.rollRad)
  return (name) => {
    const [x, y] = body.points[name] ?? [Number.NaN, Number.NaN]
    return [x * c + y * s, y * c - x * s]
  }
}

export function plainSagittal(body: PlainBody): Record<string, number> {
  const at = uprightAt(body)
  const { sign: s, mmPerPx } = body
  const [xA, yA] = at('acromion')
  const [xG, yG] = at('greaterTrochanter')
  const [xK, yK] = at('lateralEpicondyle')
  const [xM, yM] = at('lateralMalleolus')
  const [xH, yH] = at('heel')
  const [xT, yT] = at('fifthMetatarsal')
  const [xE, yE] = at('tragus')
  const [xC, yC] = at('c7')
  const [xEye, yEye] = at('canthus')
  const [xElbow] = at('elbow')
  const trunk = Math.atan2(s * (xA - xG), -(yA - yG)) * DEG
  const thigh = Math.atan2(s * (xK - xG), yK - yG) * DEG
  const hanging = Math.atan2(s * (xM - xK), yM - yK) * DEG
  const leg = Math.hypot(xK - xG, yK - yG) + Math.hypot(xM - xK, yM - yK)
  const offset = (px: number) => (mmPerPx === null ? 100 * px / leg : px * mmPerPx)
  const ahead = s * (0.029 * 0.5 * (xT - xM) + 0.093 * 0.567 * (xK - xM) + 0.2 * (xG + 0.433 * (xK - xG) - xM) + 0.678 * (xG + 0.626 * (xA - xG) - xM))
  return {
    'trunkInclination': trunk,
    'thighInclination': thigh,
    'shankInclination': -hanging,
    'hipFlexion': trunk + thigh,
    'kneeFlexion': thigh - hanging,
    'ankleDorsiflexion': -hanging + Math.atan2(-(yT - yH), s * (xT - xH)) * DEG,
    'craniovertebralAngle': Math.atan2(-(yE - yC), s * (xE - xC)) * DEG,
    'gazeAngle': Math.atan2(-(yEye - yE), s * (xEye - xE)) * DEG,
    'plumbOffset.ear': offset(s * (xE - xM)),
    'plumbOffset.acromion': offset(s * (xA - xM)),
    'plumbOffset.greaterTrochanter': offset(s * (xG - xM)),
    'plumbOffset.knee': offset(s * (xK - xM)),
    'elbowUnderShoulder': offset(s * (xElbow - xA)),
    'centreOfMassOffset': mmPerPx === null ? 100 * ahead / Math.hypot(xT - xH, yT - yH) : ahead * mmPerPx,
    ...(mmPerPx === null ? {} : clearances(at, mmPerPx)),
  }
}

function clearances(at: At, mmPerPx: number): Record<string, number> {
  const above = (lower: string, upper: string) => (at(lower)[1] - at(upper)[1]) * mmPerPx
  return {
    axillaClearance: above('supportTop', 'axilla'),
    thighClearance: above('thighTop', 'bodySupportBottom'),
    armSupportToRib: above('lowerRib', 'armSupportTop'),
  }
}

function frontalKnee(at: At, side: 'Left' | 'Right', m: number): number {
  const [xH, yH] = at(`asis${side}`)
  const [xK, yK] = at(`kneeCentre${side}`)
  const [xA, yA] = at(`ankleCentre${side}`)
  const lat = m * (side === 'Left' ? 1 : -1)
  return (Math.atan2(lat * (xA - xK), yA - yK) - Math.atan2(lat * (xK - xH), yK - yH)) * DEG
}

export function plainFrontal(body: PlainBody, pelvis: 'asis' | 'psis'): Record<string, number> {
  const at = uprightAt(body)
  const m = body.sign
  const tilt = (name: string) => {
    const [xL, yL] = at(`${name}Left`)
    const [xR, yR] = at(`${name}Right`)
    return Math.atan2(-(yL - yR), m * (xL - xR)) * DEG
  }
  const mid = (name: string): Point => {
    const [xL, yL] = at(`${name}Left`)
    const [xR, yR] = at(`${name}Right`)
    return [(xL + xR) / 2, (yL + yR) / 2]
  }
  const [xTop, yTop] = mid('acromion')
  const [xLow, yLow] = mid(pelvis)
  const over = body.points.sternalNotch ? at('sternalNotch') : mid('acromion')
  const [xL, yL] = at('ankleCentreLeft')
  const [xR, yR] = at('ankleCentreRight')
  const [xAL, yAL] = at('acromionLeft')
  const [xAR, yAR] = at('acromionRight')
  return {
    shoulderTilt: tilt('acromion'),
    pelvicTilt: tilt(pelvis),
    headTilt: tilt('tragus'),
    trunkLean: Math.atan2(m * (xTop - xLow), -(yTop - yLow)) * DEG,
    trunkOnPelvis: tilt('acromion') - tilt(pelvis),
    midlineShift: m * (over[0] - (xL + xR) / 2) / (Math.abs(xL - xR) / 2),
    stanceWidthRatio: Math.hypot(xL - xR, yL - yR) / Math.hypot(xAL - xAR, yAL - yAR),
    ...(pelvis === 'asis'
      ? { 'frontalKneeAngle.left': frontalKnee(at, 'Left', m), 'frontalKneeAngle.right': frontalKnee(at, 'Right', m) }
      : {}),
  }
}

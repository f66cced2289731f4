/**
 * Two frames of a walking person, raw markers in cm, x forward, y up. Source: D. A. Winter, Biomechanics and Motor
 * Control of Human Movement, Table A.1 (frames 36 and 28). The angles are computed from those coordinates with the
 * definitions of the measures; the rib marker stands for the acromion.
 */
export interface WinterFrame {
  readonly frame: number
  readonly rib: readonly [number, number]
  readonly hip: readonly [number, number]
  readonly knee: readonly [number, number]
  readonly fibularHead: readonly [number, number]
  readonly ankle: readonly [number, number]
  readonly trunk: number
  readonly hipAngle: number
  readonly kneeAngle: number
  /** Knee angle when the shank runs from the fibular head. */
  readonly kneeAngleFromFibula: number
}

export const WINTER_FRAMES: readonly WinterFrame[] = [
  {
    frame: 36,
    rib: [116.74, 104.54], hip: [118.78, 81.63], knee: [128.32, 51.86], fibularHead: [128.83, 42.69], ankle: [129.46, 9.10],
    trunk: -5.088, hipAngle: 12.680, kneeAngle: 16.241, kneeAngleFromFibula: 16.694,
  },
  {
    frame: 28,
    rib: [98.73, 103.52], hip: [101.53, 79.34], knee: [112.34, 50.46], fibularHead: [113.87, 41.80], ankle: [124.94, 10.63],
    trunk: -6.605, hipAngle: 13.916, kneeAngle: 2.967, kneeAngleFromFibula: 0.969,
  },
]

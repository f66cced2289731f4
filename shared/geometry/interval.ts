/** A confidence interval. */
export interface Interval {
  readonly low: number
  readonly high: number
}

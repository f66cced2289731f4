import jStat from 'jstat'
import { Z95 } from './error-band'
import { GeometryError } from './geometry-error'
import type { Interval } from './interval'

/** The six forms of Shrout & Fleiss: one-way, two-way random, two-way mixed; of one rating or of the mean of k. */
export type IccForm = '1,1' | '2,1' | '3,1' | '1,k' | '2,k' | '3,k'

export interface Icc {
  readonly value: number
  readonly interval: Interval
}

/** Agreement of several raters (or repeats) on several subjects. */
export interface RaterAgreement {
  readonly subjects: number
  readonly raters: number
  readonly icc: Readonly<Record<IccForm, Icc>>
  /** Standard error of measurement with the raters' differences in it, in the unit of the ratings. */
  readonly semAgreement: number
  /** The same without them. */
  readonly semConsistency: number
  /** Smallest change that 95 % of unchanged subjects stay under: 1.96 · √2 · SEM of agreement. */
  readonly mdc95: number
}

/** Mean squares of a subjects × raters table. */
interface MeanSquares {
  readonly n: number
  readonly k: number
  readonly subjects: number
  readonly raters: number
  readonly error: number
  readonly within: number
}

function meanOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length
}

function checkTable(ratings: readonly (readonly number[])[]): void {
  const k = ratings[0]?.length ?? 0
  if (ratings.length < 2 || k < 2) throw new GeometryError('not-enough-data', 'Agreement needs two subjects and two raters')
  if (ratings.some(row => row.length !== k)) throw new GeometryError('shape-mismatch', 'Every subject needs a rating by every rater')
  if (!ratings.flat().every(Number.isFinite)) throw new GeometryError('not-finite', 'A rating is not a number')
}

function meanSquares(ratings: readonly (readonly number[])[]): MeanSquares {
  const n = ratings.length
  const k = ratings[0]?.length ?? 0
  const all = meanOf(ratings.flat())
  const bySubject = ratings.map(meanOf)
  const byRater = Array.from({ length: k }, (_, rater) => meanOf(ratings.map(row => row[rater] ?? 0)))
  const subjects = k * bySubject.reduce((sum, mean) => sum + (mean - all) ** 2, 0)
  const raters = n * byRater.reduce((sum, mean) => sum + (mean - all) ** 2, 0)
  const total = ratings.flat().reduce((sum, value) => sum + (value - all) ** 2, 0)
  return {
    n,
    k,
    subjects: subjects / (n - 1),
    raters: raters / (k - 1),
    error: Math.max(0, total - subjects - raters) / ((n - 1) * (k - 1)),
    within: Math.max(0, total - subjects) / (n * (k - 1)),
  }
}

/** The reliability of k ratings from that of one (Spearman–Brown). */
function steppedUp(single: number, k: number): number {
  return k * single / (1 + (k - 1) * single)
}

function both(single: Icc, k: number): readonly [Icc, Icc] {
  const { low, high } = single.interval
  return [single, { value: steppedUp(single.value, k), interval: { low: steppedUp(low, k), high: steppedUp(high, k) } }]
}

/** (F − 1)/(F + k − 1) with F divided and multiplied by its quantiles: forms 1 and 3 differ only in the error term. */
function ratioIcc(ms: MeanSquares, error: number, errorDf: number, tail: number): Icc {
  const { n, k } = ms
  const ratio = ms.subjects / error
  const from = (f: number) => (f - 1) / (f + k - 1)
  return {
    value: (ms.subjects - error) / (ms.subjects + (k - 1) * error),
    interval: {
      low: from(ratio / jStat.centralF.inv(1 - tail, n - 1, errorDf)),
      high: from(ratio * jStat.centralF.inv(1 - tail, errorDf, n - 1)),
    },
  }
}

/** Form 2: its interval rests on an approximated df. Source: Shrout & Fleiss 1979; McGraw & Wong 1996, Psychol Methods 1:30–46. */
function twoWayIcc(ms: MeanSquares, tail: number): Icc {
  const { n, k, subjects, raters, error } = ms
  const value = (subjects - error) / (subjects + (k - 1) * error + k * (raters - error) / n)
  const ratio = raters / error
  const a = k * value * ratio + n * (1 + (k - 1) * value) - k * value
  const df = (k - 1) * (n - 1) * a ** 2 / ((n - 1) * (k * value * ratio) ** 2 + (n * (1 + (k - 1) * value) - k * value) ** 2)
  const upper = jStat.centralF.inv(1 - tail, n - 1, df)
  const lower = jStat.centralF.inv(1 - tail, df, n - 1)
  const spread = k * raters + (k * n - k - n) * error
  return {
    value,
    interval: {
      low: n * (subjects - upper * error) / (upper * spread + n * subjects),
      high: n * (lower * subjects - error) / (spread + n * lower * subjects),
    },
  }
}

/**
 * Agreement of raters: the intraclass correlations in their six forms with confidence intervals, SEM and MDC95.
 * @param ratings one row a subject, one column a rater, no blanks
 * @param confidence of the intervals, 0.95 for 95 %
 * @throws GeometryError `not-enough-data`, `shape-mismatch`, `not-finite`; `out-of-range` when subjects do not differ or raters agree
 * to the last digit, where no correlation is defined.
 * Source: Shrout & Fleiss 1979, Psychol Bull 86:420–428; SEM: de Vet et al. 2006, J Clin Epidemiol 59:1033–1039.
 */
export function raterAgreement(ratings: readonly (readonly number[])[], confidence = 0.95): RaterAgreement {
  checkTable(ratings)
  const ms = meanSquares(ratings)
  if (!(ms.error > 0) || !(ms.subjects > 0)) throw new GeometryError('out-of-range', 'The ratings do not vary')
  const { n, k } = ms
  const tail = (1 - confidence) / 2
  const [one, oneMean] = both(ratioIcc(ms, ms.within, n * (k - 1), tail), k)
  const [two, twoMean] = both(twoWayIcc(ms, tail), k)
  const [three, threeMean] = both(ratioIcc(ms, ms.error, (n - 1) * (k - 1), tail), k)
  const semAgreement = Math.sqrt(Math.max(0, ms.raters - ms.error) / n + ms.error)
  return {
    subjects: n,
    raters: k,
    icc: { '1,1': one, '2,1': two, '3,1': three, '1,k': oneMean, '2,k': twoMean, '3,k': threeMean },
    semAgreement,
    semConsistency: Math.sqrt(ms.error),
    mdc95: mdc95FromSem(semAgreement),
  }
}

/** SEM from the spread of the subjects and a reliability: SD · √(1 − ICC). */
export function semFromReliability(sd: number, icc: number): number {
  return sd * Math.sqrt(Math.max(0, 1 - icc))
}

/** MDC95 = 1.96 · √2 · SEM. */
export function mdc95FromSem(sem: number): number {
  return Z95 * Math.SQRT2 * sem
}

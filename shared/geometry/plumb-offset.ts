import { across, legLength, percentOf } from './direction'
import type { LandmarkId, Segment } from './landmarks'
import { defineMeasure, type MeasureDefinition, recipe, type Recipe } from './measure-definition'

/**
 * The two recipes of a horizontal offset from `origin` to `target`, + in front: in millimetres with a scale, else in
 * percent of leg length (trochanter–epicondyle plus epicondyle–malleolus), never in pixels.
 */
export function offsetRecipes(origin: LandmarkId, target: LandmarkId, segment: Segment): readonly Recipe[] {
  const lines = [{ from: [origin], to: [target], segment }]
  return [
    recipe({
      views: ['sagittal'],
      landmarks: [origin, target],
      unit: 'mm',
      needsScale: true,
      compute: (at, { facing, toMillimetres }) => toMillimetres(across(at(origin), at(target), facing)),
      lines,
      shownAt: [target],
    }),
    recipe({
      views: ['sagittal'],
      landmarks: [...new Set<LandmarkId>([origin, target, 'greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus'])],
      unit: '%',
      compute: (at, { facing }) => percentOf(
        across(at(origin), at(target), facing),
        legLength(at('greaterTrochanter'), at('lateralEpicondyle'), at('lateralMalleolus')),
      ),
      lines,
      shownAt: [target],
    }),
  ]
}

/** Horizontal distance of a landmark from the lateral malleolus; + in front of the ankle. */
export function definePlumbOffset<const Id extends string>(id: Id, target: LandmarkId, segment: Segment, source: string): MeasureDefinition<Id> {
  return defineMeasure({
    id,
    reference: 'vertical',
    recipes: offsetRecipes('lateralMalleolus', target, segment),
    changeFloor: { 'mm': 10, '%': 5 },
    segments: [segment],
    source: `${source} Context, not a target: Woodhull et al. 1985, Eur J Appl Physiol 54:109–115.`,
    cautions: ['camera-roll', 'scale-in-plane', 'parallax', 'out-of-plane'],
  })
}

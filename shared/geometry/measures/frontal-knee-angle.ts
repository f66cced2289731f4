import { type AxisSign, hangingAngle } from '../direction'
import { subtract } from '../dual'
import type { LandmarkId, Side } from '../landmarks'
import { defineMeasure, recipe, type Recipe } from '../measure-definition'

function kneeRecipe(side: Side, hip: LandmarkId, knee: LandmarkId, ankle: LandmarkId): Recipe {
  return recipe({
    views: ['frontal-anterior'],
    side,
    landmarks: [hip, knee, ankle],
    unit: 'deg',
    compute: (at, { viewSign }) => {
      const mirrored: AxisSign = viewSign === 1 ? -1 : 1
      const lateral = side === 'left' ? viewSign : mirrored
      return subtract(
        hangingAngle(at(knee), at(ankle), lateral),
        hangingAngle(at(hip), at(knee), lateral),
      )
    },
    lines: [
      { from: [hip], to: [knee], segment: 'thigh' },
      { from: [knee], to: [ankle], segment: 'shank' },
    ],
    shownAt: [knee],
  })
}

/** ASIS → knee centre → ankle centre, from the front only; + valgus. */
export const frontalKneeAngle = defineMeasure({
  id: 'frontalKneeAngle',
  reference: 'body',
  sided: true,
  recipes: [
    kneeRecipe('left', 'asisLeft', 'kneeCentreLeft', 'ankleCentreLeft'),
    kneeRecipe('right', 'asisRight', 'kneeCentreRight', 'ankleCentreRight'),
  ],
  changeFloor: { deg: 8 },
  segments: ['thigh', 'shank'],
  source: 'Frontal plane projection angle from ASIS, knee centre and ankle centre. Smallest detectable difference 7.5–8.9°: Munro et al. 2012, J Sport Rehabil 21:7–11. Not judged.',
  cautions: ['neutral-not-zero', 'out-of-plane'],
})

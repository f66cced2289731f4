import { defineMeasure } from '../measure-definition'
import { offsetRecipes } from '../plumb-offset'

/** Horizontal distance from acromion to elbow; + elbow in front of the shoulder. */
export const elbowUnderShoulder = defineMeasure({
  id: 'elbowUnderShoulder',
  reference: 'vertical',
  recipes: offsetRecipes('acromion', 'elbow', 'arm'),
  changeFloor: { 'mm': 10, '%': 5 },
  segments: ['arm'],
  source: 'Elbows under the shoulders: common practice in supported standing. Not judged.',
  cautions: ['camera-roll', 'scale-in-plane', 'parallax'],
})

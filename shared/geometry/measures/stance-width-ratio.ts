import { span } from '../direction'
import { divide } from '../dual'
import { defineMeasure, recipe } from '../measure-definition'

/** Distance of the ankle centres over the distance of the acromia; 1 when the ankles are as far apart as the acromia. */
export const stanceWidthRatio = defineMeasure({
  id: 'stanceWidthRatio',
  reference: 'body',
  recipes: [recipe({
    views: ['frontal-anterior', 'frontal-posterior'],
    landmarks: ['ankleCentreLeft', 'ankleCentreRight', 'acromionLeft', 'acromionRight'],
    unit: '1',
    compute: at => divide(
      span(at('ankleCentreLeft'), at('ankleCentreRight')),
      span(at('acromionLeft'), at('acromionRight')),
    ),
    lines: [
      { from: ['ankleCentreRight'], to: ['ankleCentreLeft'], segment: 'shank' },
      { from: ['acromionRight'], to: ['acromionLeft'], segment: 'trunk' },
    ],
    shownAt: ['ankleCentreLeft', 'ankleCentreRight'],
  })],
  defaultTarget: { low: 0.5, high: 1 },
  changeFloor: { 1: 0.1 },
  segments: ['shank'],
  source: 'Ankle distance over acromial distance. Target: design choice around feet under the shoulders, common practice.',
  cautions: ['trunk-turn', 'parallax'],
})

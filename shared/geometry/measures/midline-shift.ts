import { across, breadth, middle } from '../direction'
import { divide, scaleBy } from '../dual'
import { defineMeasure, recipe } from '../measure-definition'

/** Sternal notch (else mid-acromion) over the base between the ankle centres; ±1 is over that ankle, + person's left. */
export const midlineShift = defineMeasure({
  id: 'midlineShift',
  reference: 'vertical',
  recipes: [
    recipe({
      views: ['frontal-anterior', 'frontal-posterior'],
      landmarks: ['sternalNotch', 'ankleCentreLeft', 'ankleCentreRight'],
      unit: '1',
      compute: (at, { viewSign }) => divide(
        across(middle(at('ankleCentreLeft'), at('ankleCentreRight')), at('sternalNotch'), viewSign),
        scaleBy(breadth(at('ankleCentreLeft'), at('ankleCentreRight')), 0.5),
      ),
      lines: [
        { from: ['ankleCentreLeft', 'ankleCentreRight'], to: ['sternalNotch'], segment: 'trunk' },
        { from: ['ankleCentreRight'], to: ['ankleCentreLeft'], segment: 'shank' },
      ],
      shownAt: ['ankleCentreLeft', 'ankleCentreRight'],
    }),
    recipe({
      views: ['frontal-anterior', 'frontal-posterior'],
      landmarks: ['acromionLeft', 'acromionRight', 'ankleCentreLeft', 'ankleCentreRight'],
      unit: '1',
      compute: (at, { viewSign }) => divide(
        across(middle(at('ankleCentreLeft'), at('ankleCentreRight')), middle(at('acromionLeft'), at('acromionRight')), viewSign),
        scaleBy(breadth(at('ankleCentreLeft'), at('ankleCentreRight')), 0.5),
      ),
      lines: [
        { from: ['ankleCentreLeft', 'ankleCentreRight'], to: ['acromionLeft', 'acromionRight'], segment: 'trunk' },
        { from: ['ankleCentreRight'], to: ['ankleCentreLeft'], segment: 'shank' },
      ],
      shownAt: ['ankleCentreLeft', 'ankleCentreRight'],
    }),
  ],
  changeFloor: { 1: 0.1 },
  segments: ['trunk', 'shank'],
  source: 'Position of the trunk over the base, in half base widths. Geometry, not load. Not judged.',
  cautions: ['geometry-not-load', 'camera-roll', 'parallax'],
})

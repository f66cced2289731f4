import type { FigureScene, FigureView, PersonName } from '../../tests/fixtures/figure/figure.mjs'

export interface DemoClip {
  person: PersonName
  view: FigureView
  facing?: 'left' | 'right'
  width: number
  height: number
  fps: number
  seconds: number
  /** Frames that the seed marks; the pose holds exactly at the first. */
  marked: number[]
  scene: FigureScene
  camera: { share?: number, at?: number, floor?: number, rollDegrees?: number }
  pose?: Record<string, number>
  sway?: Record<string, number>
  keys?: [number, Record<string, number>][]
  frame?: boolean
  helper?: boolean
  bench?: { height: number, from: number, to: number }
  codec?: 'hevc'
  turned?: boolean
}
export const CLIPS: Record<string, DemoClip>

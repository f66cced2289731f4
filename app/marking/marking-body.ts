import type { View } from '#shared/geometry/landmarks'
import type { MarkingBody } from '#shared/geometry/marking'
import type { MarkingInput } from '#shared/schemas/marking'
import type { MarkingDocument } from './document'
import type { Size } from './viewport'

/** The marking as the interface of the server takes and gives it, without `status`. */
export type MarkingFields = Omit<MarkingInput, 'status'>

/**
 * @returns the body that saves `document`. Facing and near side belong to a sagittal view alone; flags that are off are left out.
 */
export function toMarkingFields(document: MarkingDocument, view: View): MarkingFields {
  const isSagittal = view === 'sagittal'
  const landmarks = Object.fromEntries(Object.entries(document.landmarks)
    .map(([name, { x, y, sd }]) => [name, sd === undefined ? { x, y } : { x, y, sd }]))
  return {
    landmarks,
    ...(Object.keys(document.notVisible).length > 0 ? { notVisible: { ...document.notVisible } } : {}),
    ...(isSagittal && document.facing ? { facing: document.facing } : {}),
    ...(isSagittal && document.side ? { side: document.side } : {}),
    ...(document.mirrored ? { mirrored: true } : {}),
    ...(document.clothed ? { clothed: true } : {}),
    ...(document.supported ? { supported: true } : {}),
    ...(document.plumbLine ? { plumbLine: document.plumbLine } : {}),
    ...(document.scale ? { scale: document.scale } : {}),
  }
}

/** @returns the document that a saved body stands for. */
export function fromMarkingFields(fields: MarkingFields): MarkingDocument {
  return {
    landmarks: fields.landmarks,
    notVisible: fields.notVisible ?? {},
    facing: fields.facing ?? null,
    side: fields.side ?? null,
    mirrored: fields.mirrored ?? false,
    clothed: fields.clothed ?? false,
    supported: fields.supported ?? false,
    plumbLine: fields.plumbLine ?? null,
    scale: fields.scale ?? null,
  }
}

/** @returns what the measuring core takes. `picture` in pixels of the review copy. */
export function toMeasurable(document: MarkingDocument, view: View, picture: Size): MarkingBody {
  return { ...toMarkingFields(document, view), view, width: picture.width, height: picture.height }
}

/**
 * What a new still of a clip begins with while the camera stands still: plumb line, scale and what is said
 * about the whole picture; never a landmark.
 */
export function inheritSetting(last: MarkingDocument): MarkingDocument {
  return { ...last, landmarks: {}, notVisible: {} }
}

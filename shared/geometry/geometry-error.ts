/** Why a body cannot be measured. Stable words: the interface and the HTTP answers switch on them. */
export type GeometryErrorCode =
  | 'facing-required'
  | 'landmark-not-in-view'
  | 'landmark-out-of-picture'
  | 'landmarks-coincide'
  | 'marked-and-not-visible'
  | 'not-finite'
  | 'not-enough-data'
  | 'not-enough-points'
  | 'out-of-range'
  | 'picture-size-invalid'
  | 'plumb-line-too-short'
  | 'points-on-a-line'
  | 'scale-ends-coincide'
  | 'scale-length-invalid'
  | 'sd-invalid'
  | 'shape-mismatch'
  | 'unknown-landmark'

/** The input cannot give an honest number. `path` names the landmark or field at fault, as in `['landmarks', 'acromion', 'x']`. */
export class GeometryError extends Error {
  readonly code: GeometryErrorCode
  readonly path: readonly string[]

  constructor(code: GeometryErrorCode, message: string, path: readonly string[] = []) {
    super(message)
    this.name = 'GeometryError'
    this.code = code
    this.path = path
  }
}

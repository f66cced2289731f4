/** Every error a person or a program can meet, with its status and its sentence. Codes are stable. */
const ERRORS = {
  'validation-failed': [400, 'Some fields are not right'],
  'facing-required': [400, 'Say which way the person faces, or mark heel and fifth metatarsal'],
  'plumb-line-too-short': [400, 'The plumb line is shorter than a third of the picture'],
  'landmarks-coincide': [400, 'Two landmarks lie on the same point'],
  'nothing-marked': [400, 'A final marking needs landmarks'],
  'support-above-mass': [400, 'The weight off the feet is more than the body mass'],
  'range-not-satisfiable': [416, 'That part of the clip does not exist'],
  'not-signed-in': [401, 'Sign in first'],
  'wrong-credentials': [401, 'That address and password do not fit together'],
  'not-allowed': [403, 'Your role does not include this'],
  'cross-origin': [403, 'Changes are taken from Standmark\'s own pages only'],
  'not-found': [404, 'There is nothing at this address'],
  'patient-not-found': [404, 'Patient not found'],
  'user-not-found': [404, 'Person not found'],
  'consent-not-found': [404, 'Consent not found'],
  'session-not-found': [404, 'Session not found'],
  'bout-not-found': [404, 'Bout not found'],
  'clip-not-found': [404, 'Clip not found'],
  'still-not-found': [404, 'Still not found'],
  'marking-not-found': [404, 'Marking not found'],
  'method-not-allowed': [405, 'This address does not take that method'],
  'record-number-taken': [409, 'Another patient has this record number'],
  'already-on-care-team': [409, 'This person is on the care team already'],
  'last-care-team-member': [409, 'A chart needs at least one therapist on its care team'],
  'bout-overlaps': [409, 'The bout overlaps another bout of this person'],
  'consent-withdrawn': [409, 'This consent was withdrawn already'],
  'no-recording-consent': [409, 'There is no consent to recording'],
  'upload-not-open': [409, 'This upload is not open any more'],
  'part-missing': [409, 'Some parts of the file are missing'],
  'etag-mismatch': [409, 'A part does not fit what the storage holds'],
  'clip-not-ready': [409, 'The clip is not ready yet'],
  'clip-has-markings': [409, 'Stills of this clip are marked'],
  'request-in-flight': [409, 'The same request is being worked on'],
  'conflict': [409, 'This does not fit the state of things'],
  'stale-version': [412, 'Someone saved a newer version'],
  'version-required': [428, 'Send the version you are changing in If-Match'],
  'body-too-large': [413, 'The request is too large'],
  'clip-too-large': [413, 'The file is larger than 2 GB'],
  'unsupported-content-type': [415, 'That type is not taken here'],
  'idempotency-mismatch': [422, 'This Idempotency-Key was used with another request'],
  'too-many-attempts': [429, 'Too many failed attempts'],
  'database-unavailable': [503, 'The database does not answer'],
  'storage-unavailable': [503, 'The storage does not answer'],
  'wrong-role': [503, 'This process runs jobs and serves no pages'],
  'internal': [500, 'Something went wrong on our side'],
} as const satisfies Record<string, readonly [number, string]>

export type AppErrorCode = keyof typeof ERRORS

export interface AppErrorDetails {
  /** The fields at fault. */
  issues?: { path: string, message: string }[]
  /** With 412: the state that is kept now. */
  current?: unknown
  retryAfterSeconds?: number
  headers?: Record<string, string>
  cause?: unknown
}

/** What services throw; `defineApiHandler` turns it into the error JSON of the interface. */
export class AppError extends Error {
  readonly statusCode: number

  constructor(readonly code: AppErrorCode, readonly details: AppErrorDetails = {}) {
    super(ERRORS[code][1], { cause: details.cause })
    this.name = 'AppError'
    this.statusCode = ERRORS[code][0]
  }
}

/** @returns every code with its status, for the published interface. */
export function listErrors(): { code: string, status: number, message: string }[] {
  return Object.entries(ERRORS).map(([code, [status, message]]) => ({ code, status, message }))
}

const CONNECTION_CODES = new Set(['ECONNREFUSED', 'ECONNRESET', 'ENOTFOUND', 'EPIPE', 'ETIMEDOUT', '57P01', '57P02', '57P03', '53300', '08000', '08003', '08006', '25P03'])

function chain(error: unknown): { code: string | undefined, constraint: string | undefined, message: string }[] {
  const links = []
  for (let link = error; link instanceof Error; link = link.cause) {
    const code = 'code' in link && typeof link.code === 'string' ? link.code : undefined
    const constraint = 'constraint' in link && typeof link.constraint === 'string' ? link.constraint : undefined
    links.push({ code, constraint, message: link.message })
  }
  return links
}

/** @returns whether the error says that the database is away, and not that a statement was wrong. */
export function isDatabaseAway(error: unknown): boolean {
  return chain(error).some(link => (link.code !== undefined && CONNECTION_CODES.has(link.code))
    || /timeout exceeded when trying to connect|Connection terminated|Query read timeout|The database is not open/.test(link.message))
}

/** @returns the name of the database constraint that refused a write, if that is what happened. */
export function violatedConstraint(error: unknown): string | undefined {
  return chain(error).find(link => link.code?.startsWith('23'))?.constraint
}

import { chmod, open, readFile } from 'node:fs/promises'
import { availableParallelism } from 'node:os'
import { join } from 'node:path'
import { MediaCrash, runCaged, type MediaLimits, type MediaRun } from './media-cage'
import { createFolders } from './media-folders'
import { packetArguments, probeArguments } from './media-arguments'
import { isMachineTrouble, parseProbe, readComplaint, type MediaFacts, type Unreadable, type VideoFacts } from './media-probe'
import { readProgress, reviewArguments, type PictureSize, type ReviewPlan, type ReviewProgress } from './media-review'
import { cutArguments, type CutPlan } from './media-still'
import { parseDecodedTimes, parsePackets, planFilmstrip, surveyArguments, frameAt, type FilmstripPlan, type FrameList } from './media-survey'
import { settings } from './settings'

export interface MediaSettings { workDir: string, ffmpeg: string, ffprobe: string }
export interface Survey { list: FrameList, filmstrip: FilmstripPlan }
export interface Watch { onProgress: (progress: ReviewProgress) => void, signal?: AbortSignal }

/** The file is at fault, and why. */
export class MediaRefusal extends Error {
  override name = 'MediaRefusal'
  constructor(readonly reason: Unreadable) {
    super(reason)
  }
}

/** The one file of a job's folder; its own name never comes from a person. */
export const INPUT_NAME = 'in'
export const REVIEW_NAME = 'review.mp4'
export const POSTER_NAME = 'poster.webp'
export const FILMSTRIP_NAME = 'filmstrip.webp'
const REPORT_NAME = 'frames.txt'
const STILL_NAME = 'still.png'

const MEGABYTE = 1_000_000
const MEMORY_BYTES = 3_000 * MEGABYTE
const PROBE: MediaLimits = { wallMs: 10_000, cpuSeconds: 10, outputBytes: MEGABYTE, memoryBytes: MEMORY_BYTES }
const CUT: MediaLimits = { wallMs: 20_000, cpuSeconds: 20, outputBytes: 100 * MEGABYTE, memoryBytes: MEMORY_BYTES }
const MAX_REVIEW_BYTES = 1_500 * MEGABYTE
const MAX_THREADS = 4

/** A minute and four times the clip's length of wall time; processor time on top of it for each thread. */
export function encodeLimits(seconds: number, threads: number): MediaLimits {
  const wallSeconds = 60 + Math.ceil(4 * seconds)
  return { wallMs: wallSeconds * 1000, cpuSeconds: wallSeconds * threads, outputBytes: MAX_REVIEW_BYTES, memoryBytes: MEMORY_BYTES }
}

const THREADS = Math.min(MAX_THREADS, availableParallelism())

type Run = (what: Omit<MediaRun, 'program'> & { program: 'ffmpeg' | 'ffprobe' }) => Promise<{ stdout: string, stderr: string }>

/** Frames that were really decoded, or a crash: a frame that is missing is a fault of ours, never kept silently. */
async function checkDecoded(report: string, list: FrameList): Promise<void> {
  const decoded = parseDecodedTimes(await readFile(report, 'utf8'))
  if (decoded.length === list.timesUs.length && decoded.every((timeUs, frame) => timeUs === list.timesUs[frame])) return
  throw new MediaCrash(`the review copy decodes to ${decoded.length} frames of ${list.timesUs.length}`)
}

function createReviewTools(run: Run) {
  return {
    /** @throws MediaRefusal when the file cannot be read */
    async probe(folder: string): Promise<MediaFacts> {
      await chmod(join(folder, INPUT_NAME), 0o644)
      const { stdout, stderr } = await run({ program: 'ffprobe', args: probeArguments(INPUT_NAME), folder, limits: PROBE })
      const facts = parseProbe(stdout)
      // VP9 of too many pixels is read as 0 x 0 and only complained of.
      if (facts.video && facts.video.width === 0) throw new MediaRefusal(readComplaint(stderr))
      return facts
    },

    /**
     * Makes the review copy of the folder's input.
     * @param bounds where to stop; `expectedSeconds`, as the file declares its length, sets the time limit; `isCareful`: one thread
     * @throws MediaRefusal, MediaCrash
     */
    async makeReview(folder: string, what: { video: VideoFacts, plan: ReviewPlan }, bounds: { seconds: number, frames: number, expectedSeconds: number, isCareful: boolean }, watch: Watch): Promise<void> {
      const args = reviewArguments(what.video, what.plan, { from: INPUT_NAME, to: REVIEW_NAME }, { ...bounds, threads: bounds.isCareful ? 1 : THREADS })
      await run({ program: 'ffmpeg', args, folder, limits: encodeLimits(bounds.expectedSeconds, THREADS), onLine: readProgress(watch.onProgress), ...(watch.signal ? { signal: watch.signal } : {}) })
    },

    /**
     * Decodes the review copy whole and compares what came out with its frame list; makes poster and filmstrip.
     * @throws MediaCrash when a frame is missing
     */
    async survey(folder: string, picture: PictureSize, seconds: number, signal?: AbortSignal): Promise<Survey> {
      const limits = encodeLimits(seconds, THREADS)
      const packets = await run({ program: 'ffprobe', args: packetArguments(REVIEW_NAME), folder, limits })
      const list = parsePackets(packets.stdout)
      const filmstrip = planFilmstrip(list, picture)
      const files = { from: REVIEW_NAME, report: REPORT_NAME, poster: POSTER_NAME, filmstrip: FILMSTRIP_NAME }
      const plan = { poster: frameAt(list.timesUs, list.durationUs / 2), filmstrip }
      await run({ program: 'ffmpeg', args: surveyArguments(files, plan, picture, THREADS), folder, limits, ...(signal ? { signal } : {}) })
      await checkDecoded(join(folder, REPORT_NAME), list)
      return { list, filmstrip }
    },
  }
}

function createStillTools(run: Run) {
  return {
    /** Cuts one frame out of stretches of a review copy. @returns the PNG */
    async cutStill(folder: string, fileSize: number, plan: CutPlan, stretches: readonly Buffer[]): Promise<Buffer> {
      const file = await open(join(folder, INPUT_NAME), 'w', 0o644)
      try {
        await file.truncate(fileSize)
        for (const [at, range] of plan.ranges.entries()) {
          const bytes = stretches[at]
          if (bytes) await file.write(bytes, 0, bytes.length, range.start)
        }
      } finally {
        await file.close()
      }
      await run({ program: 'ffmpeg', args: cutArguments(plan, { from: INPUT_NAME, to: STILL_NAME }), folder, limits: CUT })
      return readFile(join(folder, STILL_NAME))
    },
  }
}

/** ffmpeg and ffprobe in their cage. Files are named relative to a job's own folder. */
export function createMedia(of: MediaSettings) {
  const folders = createFolders(of.workDir)
  /** Runs a tool; damage becomes a MediaRefusal, the machine's own trouble a plain error. */
  const run: Run = async (what) => {
    const result = await runCaged(await folders.cage(), { ...what, program: of[what.program] })
    if (result.code === 0) return result
    if (isMachineTrouble(result.stderr)) throw new Error(`${what.program} could not work: ${result.stderr.slice(-300)}`)
    throw new MediaRefusal(readComplaint(result.stderr))
  }
  return { ...folders, ...createReviewTools(run), ...createStillTools(run) }
}
export type Media = ReturnType<typeof createMedia>

let current: Media | undefined

/** The media tools of this process, as the settings name them. */
export function media(): Media {
  current ??= createMedia(settings())
  return current
}

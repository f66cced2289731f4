import { chown, chmod, mkdir, mkdtemp, open, readdir, readFile, rm, stat } from 'node:fs/promises'
import { availableParallelism } from 'node:os'
import { join } from 'node:path'
import { findCage, MediaCrash, runCaged, type Cage, type MediaLimits, type MediaRun } from './media-cage'
import { packetArguments, probeArguments } from './media-arguments'
import { isMachineTrouble, parseProbe, readComplaint, type MediaFacts, type Unreadable, type VideoFacts } from './media-probe'
import { readProgress, reviewArguments, type PictureSize, type ReviewPlan, type ReviewProgress } from './media-review'
import { cutArguments, type CutPlan } from './media-still'
import { parseDecodedTimes, parsePackets, planFilmstrip, surveyArguments, frameAt, type FilmstripPlan, type FrameList } from './media-survey'

export interface MediaSettings { workDir: string, ffmpeg: string, ffprobe: string }
export interface Survey { list: FrameList, filmstrip: FilmstripPlan }

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
const STALE_FOLDER_MS = 24 * 60 * 60 * 1000

/** A minute and four times the clip's length of wall time; processor time on top of it for each thread. */
export function encodeLimits(seconds: number, threads: number): MediaLimits {
  const wallSeconds = 60 + Math.ceil(4 * seconds)
  return { wallMs: wallSeconds * 1000, cpuSeconds: wallSeconds * threads, outputBytes: MAX_REVIEW_BYTES, memoryBytes: MEMORY_BYTES }
}

function isRunning(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  } catch (error) {
    // Another user's process is alive too; only "no such process" is not.
    return error instanceof Error && 'code' in error && error.code === 'EPERM'
  }
}

/** ffmpeg and ffprobe in their cage. Files are named relative to a job's own folder. */
export function createMedia(settings: MediaSettings) {
  const threads = Math.min(MAX_THREADS, availableParallelism())
  let cage: Promise<Cage> | undefined

  async function openCage(): Promise<Cage> {
    cage ??= mkdir(settings.workDir, { recursive: true, mode: 0o700 }).then(() => findCage(settings.workDir))
    return cage
  }

  /** Runs a tool; damage becomes a MediaRefusal, the machine's own trouble a plain error. */
  async function run(what: Omit<MediaRun, 'program'> & { program: 'ffmpeg' | 'ffprobe' }): Promise<{ stdout: string, stderr: string }> {
    const result = await runCaged(await openCage(), { ...what, program: settings[what.program] })
    if (result.code === 0) return result
    if (isMachineTrouble(result.stderr)) throw new Error(`${what.program} could not work: ${result.stderr.slice(-300)}`)
    throw new MediaRefusal(readComplaint(result.stderr))
  }

  return {
    /** Which walls hold here; for the log at start. */
    cage: openCage,

    /** A fresh folder for one job, gone afterwards whatever happens. */
    async withFolder<Result>(work: (folder: string) => Promise<Result>): Promise<Result> {
      const { user } = await openCage()
      const folder = await mkdtemp(join(settings.workDir, `job-${process.pid}-`))
      try {
        if (user) await chown(folder, user.uid, user.gid)
        return await work(folder)
      } finally {
        await rm(folder, { recursive: true, force: true })
      }
    },

    /** Removes folders of processes that are gone. Call at start. @returns how many */
    async sweepFolders(): Promise<number> {
      await openCage()
      let removed = 0
      for (const name of await readdir(settings.workDir)) {
        const pid = Number(/^job-(\d+)-/.exec(name)?.[1])
        if (!pid) continue
        const folder = join(settings.workDir, name)
        const changedAt = await stat(folder).then(facts => facts.mtimeMs, () => 0)
        if (isRunning(pid) && pid !== process.pid && Date.now() - changedAt < STALE_FOLDER_MS) continue
        await rm(folder, { recursive: true, force: true })
        removed += 1
      }
      return removed
    },

    /** @throws MediaRefusal when the file cannot be read */
    async probe(folder: string): Promise<MediaFacts> {
      await chmod(join(folder, INPUT_NAME), 0o644)
      const { stdout, stderr } = await run({ program: 'ffprobe', args: probeArguments(INPUT_NAME), folder, limits: PROBE })
      const facts = parseProbe(stdout)
      // VP9 of too many pixels is read as 0 x 0 and only complained of.
      if (facts.video && facts.video.width === 0) throw new MediaRefusal(readComplaint(stderr))
      return facts
    },

    /** Makes the review copy. `bounds.seconds` also sets the time limit. @throws MediaRefusal, MediaCrash */
    async makeReview(folder: string, video: VideoFacts, plan: ReviewPlan, bounds: { seconds: number, frames: number }, watch: { onProgress: (progress: ReviewProgress) => void, signal?: AbortSignal }): Promise<void> {
      const args = reviewArguments(video, plan, { from: INPUT_NAME, to: REVIEW_NAME }, { ...bounds, threads })
      await run({ program: 'ffmpeg', args, folder, limits: encodeLimits(bounds.seconds, threads), onLine: readProgress(watch.onProgress), ...(watch.signal ? { signal: watch.signal } : {}) })
    },

    /**
     * Decodes the review copy whole and compares what came out with its frame list; makes poster and filmstrip.
     * @throws Error when a frame is missing: a fault of ours, never kept silently
     */
    async survey(folder: string, picture: PictureSize, seconds: number, signal?: AbortSignal): Promise<Survey> {
      const limits = encodeLimits(seconds, threads)
      const packets = await run({ program: 'ffprobe', args: packetArguments(REVIEW_NAME), folder, limits: { ...limits, outputBytes: MEGABYTE } })
      const list = parsePackets(packets.stdout)
      const filmstrip = planFilmstrip(list, picture)
      const files = { from: REVIEW_NAME, report: REPORT_NAME, poster: POSTER_NAME, filmstrip: FILMSTRIP_NAME }
      const plan = { poster: frameAt(list.timesUs, list.durationUs / 2), filmstrip }
      await run({ program: 'ffmpeg', args: surveyArguments(files, plan, picture, threads), folder, limits, ...(signal ? { signal } : {}) })
      const decoded = parseDecodedTimes(await readFile(join(folder, REPORT_NAME), 'utf8'))
      if (decoded.length !== list.timesUs.length || decoded.some((timeUs, frame) => timeUs !== list.timesUs[frame])) {
        throw new MediaCrash(`the review copy decodes to ${decoded.length} frames of ${list.timesUs.length}`)
      }
      return { list, filmstrip }
    },

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

export type Media = ReturnType<typeof createMedia>

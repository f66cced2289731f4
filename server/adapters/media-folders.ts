import { chown, mkdir, mkdtemp, readdir, rm, stat } from 'node:fs/promises'
import { join } from 'node:path'
import { findCage, type Cage } from './media-cage'

const STALE_FOLDER_MS = 24 * 60 * 60 * 1000

function isRunning(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  } catch (error) {
    // Another user's process is alive too; only "no such process" is not.
    return error instanceof Error && 'code' in error && error.code === 'EPERM'
  }
}

/** Folders of jobs: one fresh folder a job, its name carries the process it belongs to. */
export function createFolders(workDir: string) {
  let found: Promise<Cage> | undefined

  /** The walls that hold on this machine, tried once. */
  function cage(): Promise<Cage> {
    found ??= mkdir(workDir, { recursive: true, mode: 0o700 }).then(() => findCage(workDir))
    return found
  }

  /** A fresh folder for one job, gone afterwards whatever happens. */
  async function withFolder<Result>(work: (folder: string) => Promise<Result>): Promise<Result> {
    const { user } = await cage()
    const folder = await mkdtemp(join(workDir, `job-${process.pid}-`))
    try {
      if (user) await chown(folder, user.uid, user.gid)
      return await work(folder)
    } finally {
      await rm(folder, { recursive: true, force: true })
    }
  }

  /** Removes folders of processes that are gone. Call at start, before any job. @returns how many */
  async function sweepFolders(): Promise<number> {
    await cage()
    let removed = 0
    for (const name of await readdir(workDir)) {
      const pid = Number(/^job-(\d+)-/.exec(name)?.[1])
      if (!pid) continue
      const folder = join(workDir, name)
      const changedAt = await stat(folder).then(facts => facts.mtimeMs, () => 0)
      if (pid !== process.pid && isRunning(pid) && Date.now() - changedAt < STALE_FOLDER_MS) continue
      await rm(folder, { recursive: true, force: true })
      removed += 1
    }
    return removed
  }

  return { cage, withFolder, sweepFolders }
}

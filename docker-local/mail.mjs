import { join } from 'node:path'
import { cleanEnvironment } from './commands.mjs'
import { PROJECT } from './data-folder.mjs'
import { isHealthy } from './swift.mjs'

export const MAIL_PORTS = ['mail', 'mailPage']

/**
 * The mail stand-in: takes every message, sends none on, and shows them on a page and at /api/email.
 * @param {{ folder: import('./data-folder.mjs').DataFolder, ports: Record<string, number> }} options
 * @returns {import('./supervisor.mjs').Service}
 */
export function describeMail({ folder, ports }) {
  return {
    name: 'mail',
    command: [process.execPath, join(PROJECT, 'node_modules/maildev/dist/bin/maildev.js'),
      '--smtp', String(ports.mail), '--ip', '127.0.0.1', '--web', String(ports.mailPage), '--web-ip', '127.0.0.1',
      '--mail-directory', folder.mail, '--max-emails', '500'],
    env: cleanEnvironment(),
    cwd: folder.mail,
    wave: 1,
    check: () => isHealthy(`http://127.0.0.1:${ports.mailPage}/api/email`),
    startSeconds: 60,
  }
}

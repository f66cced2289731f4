import { logger } from '#server/adapters/logger'
import { mailer } from '#server/adapters/mail'
import { sendJob } from '#server/adapters/queue'
import { settings } from '#server/adapters/settings'
import { inClinic, withoutClinic, type Transaction } from '#server/database/client'
import { findClinicOfOpening, findOpeningNotice } from '#server/database/queries/mail-queries'

export const MAIL_JOB = 'mail.send'

/** Queues the notice of an opening, in the transaction that opens: no mail about what did not happen. */
export async function queueOpeningNotice(tx: Transaction, openingId: string): Promise<void> {
  if (settings().smtpUrl) await sendJob(tx.$client, MAIL_JOB, { openingId })
}

/**
 * Mails the clinic's administrators that a chart was opened with a stated reason. The mail names neither the patient nor
 * the reason: both stand in the audit trail, behind a sign-in.
 * @returns `skipped` when the opening or everybody to tell is gone, or no mail server is set
 * @throws when the mail server does not take it, so that the queue tries again
 */
export async function sendOpeningNotice(openingId: string): Promise<'done' | 'skipped'> {
  const server = mailer()
  const clinicId = await withoutClinic(tx => findClinicOfOpening(tx, openingId))
  const notice = clinicId ? await inClinic(clinicId, 'read', tx => findOpeningNotice(tx, openingId)) : null
  if (!server || !notice) return 'skipped'
  const at = new Intl.DateTimeFormat('en', { dateStyle: 'long', timeStyle: 'short', timeZone: notice.timeZone }).format(notice.openedAt)
  for (const { name, email } of notice.administrators) {
    await server.send({
      to: { name, address: email },
      subject: 'A chart was opened with a stated reason',
      text: `${notice.openedBy} opened a chart outside their care team at ${notice.clinicName} on ${at}.\n\nThe reason and the chart stand in the audit trail: ${settings().origins[0]}/clinic/audit\n`,
    })
  }
  logger.info({ openingId, mails: notice.administrators.length }, 'opening notice mailed')
  return notice.administrators.length > 0 ? 'done' : 'skipped'
}

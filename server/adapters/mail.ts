import { createTransport, type Transporter } from 'nodemailer'
import { settings } from './settings'

export interface Mail { to: { name: string, address: string }, subject: string, text: string }

/** Outgoing mail over SMTP. Addresses go in as objects, so that no header can be smuggled in with them. */
export function createMailer(smtpUrl: string, from: string) {
  const transport: Transporter = createTransport(smtpUrl, { from, disableFileAccess: true, disableUrlAccess: true })
  return {
    /** @throws when the server does not take the mail. */
    async send(mail: Mail): Promise<void> {
      await transport.sendMail({ ...mail, disableFileAccess: true, disableUrlAccess: true })
    },
    /** @returns whether the mail server answers. */
    async isUp(): Promise<boolean> {
      return transport.verify().then(() => true, () => false)
    },
    close: () => transport.close(),
  }
}

export type Mailer = ReturnType<typeof createMailer>

let current: Mailer | undefined

/** The mail server that the settings name, or null where none is. */
export function mailer(): Mailer | null {
  const { smtpUrl, mailFrom } = settings()
  if (!smtpUrl) return null
  current ??= createMailer(smtpUrl, mailFrom)
  return current
}

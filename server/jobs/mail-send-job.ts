import { z } from 'zod'
import { sendOpeningNotice } from '#server/services/mail-service'
import { defineJob } from './job'

/** `mail.send`: tells the administrators about a stated-reason opening. */
export const mailSendJob = defineJob({
  payload: z.strictObject({ openingId: z.uuid() }),
  concurrency: 1,
  pollSeconds: 3,
  run: ({ openingId }) => sendOpeningNotice(openingId),
})

import { withoutClinic } from '#server/database/client'
import { findAccountSecret } from '#server/database/queries/account-queries'

/** The demo clinic's first account, as docker-local/demo makes it. */
const DEMO_ACCOUNT = 'therapist@alderbay.example'

/** @returns whether the database holds the demo clinic, whose passwords everybody knows. */
export function holdsDemoData(): Promise<boolean> {
  return withoutClinic(async tx => await findAccountSecret(tx, DEMO_ACCOUNT) !== null)
}

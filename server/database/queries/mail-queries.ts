import { eq, isNull, and, sql } from 'drizzle-orm'
import type { Transaction } from '../client'
import { chartOpening } from '../schema/chart-opening'
import { clinic } from '../schema/clinic'
import { userAccount } from '../schema/user-account'

/** The clinic of an opening, asked before the clinic is known. */
export async function findClinicOfOpening(tx: Transaction, openingId: string): Promise<string | null> {
  const result = await tx.execute<{ clinic: string | null }>(sql`select job_opening_clinic(${openingId}) as clinic`)
  return result.rows[0]?.clinic ?? null
}

/** What a notice of an opening says, and the administrators it goes to. The patient is not named in mail. */
export async function findOpeningNotice(tx: Transaction, openingId: string) {
  const [opening] = await tx.select({ openedAt: chartOpening.openedAt, openedBy: userAccount.name, clinicName: clinic.name, timeZone: clinic.timeZone })
    .from(chartOpening).innerJoin(userAccount, eq(userAccount.id, chartOpening.userId)).innerJoin(clinic, eq(clinic.id, chartOpening.clinicId))
    .where(eq(chartOpening.id, openingId))
  if (!opening) return null
  const administrators = await tx.select({ name: userAccount.name, email: userAccount.email }).from(userAccount)
    .where(and(sql`'administrator' = any(${userAccount.roles})`, isNull(userAccount.disabledAt)))
  return { ...opening, administrators }
}

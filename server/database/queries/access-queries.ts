import { and, eq, exists, gt, or, sql, type SQL } from 'drizzle-orm'
import { QueryBuilder, type AnyPgColumn } from 'drizzle-orm/pg-core'
import { careTeamMember } from '../schema/care-team-member'
import { chartOpening } from '../schema/chart-opening'

/** The least of an actor that access depends on. */
export interface Viewer { userId: string, roles: readonly string[], patientId: string | null }

const builder = new QueryBuilder({ casing: 'snake_case' })

function onCareTeam(viewer: Viewer, patientId: AnyPgColumn): SQL {
  return exists(builder.select({ one: sql`1` }).from(careTeamMember)
    .where(and(eq(careTeamMember.patientId, patientId), eq(careTeamMember.userId, viewer.userId))))
}

function hasOpening(viewer: Viewer, patientId: AnyPgColumn): SQL {
  return exists(builder.select({ one: sql`1` }).from(chartOpening)
    .where(and(eq(chartOpening.patientId, patientId), eq(chartOpening.userId, viewer.userId), gt(chartOpening.expiresAt, sql`now()`))))
}

/**
 * The second gate: which patients' records this person may reach. Goes into the WHERE of every query on a
 * patient's record, so that what they may not see is absent and not refused.
 * Care team; or an opening with a stated reason that has not ended. The clinic is kept by row-level security.
 */
export function visiblePatients(viewer: Viewer, patientId: AnyPgColumn): SQL {
  return or(onCareTeam(viewer, patientId), hasOpening(viewer, patientId)) ?? sql`false`
}

/** As `visiblePatients`, and a person who signs in as a patient reaches their own record. */
export function visibleOrOwn(viewer: Viewer, patientId: AnyPgColumn): SQL {
  const own = viewer.roles.includes('patient') && viewer.patientId ? eq(patientId, viewer.patientId) : sql`false`
  return or(visiblePatients(viewer, patientId), own) ?? sql`false`
}

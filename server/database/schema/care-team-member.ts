import { foreignKey, index, pgTable, primaryKey, uuid } from 'drizzle-orm/pg-core'
import { moment } from './columns'
import { patient } from './patient'
import { userAccount } from './user-account'

/** Who treats whom. It decides which charts a therapist sees. */
export const careTeamMember = pgTable('care_team_member', {
  clinicId: uuid().notNull(),
  patientId: uuid().notNull(),
  userId: uuid().notNull(),
  joinedAt: moment().notNull().defaultNow(),
}, table => [
  primaryKey({ name: 'care_team_member_key', columns: [table.patientId, table.userId] }),
  index('care_team_member_by_user').on(table.userId, table.patientId),
  foreignKey({ name: 'care_team_member_patient', columns: [table.clinicId, table.patientId], foreignColumns: [patient.clinicId, patient.id] }).onDelete('cascade'),
  foreignKey({ name: 'care_team_member_user', columns: [table.clinicId, table.userId], foreignColumns: [userAccount.clinicId, userAccount.id] }).onDelete('cascade'),
])

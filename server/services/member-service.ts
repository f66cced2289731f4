import { listMembers } from '#server/database/queries/account-queries'
import type { Member } from '#shared/schemas/account'
import type { ListOf } from '#shared/schemas/common'
import type { Role } from '#shared/types/role'
import type { Actor } from './actor'
import { readClinic } from './clinic-transaction'

/**
 * @returns a page of the people of the clinic, by name. Administrators see everybody; others see the therapists
 * only, for they must not learn who else is a patient here.
 */
export function findMembers(actor: Actor, query: { page: number, pageSize: number, role?: Role | undefined }): Promise<ListOf<Member>> {
  return readClinic(actor, async (tx) => {
    const role = actor.roles.includes('administrator') ? query.role : 'therapist'
    const { rows, total } = await listMembers(tx, { ...query, role })
    const items = rows.map(({ disabledAt, ...row }) => ({ ...row, isDisabled: disabledAt !== null }))
    return { items, total, page: query.page, pageSize: query.pageSize }
  })
}

import type { Role } from '#shared/types/role'

/**
 * The access map is data: the client reads it to hide, the server to refuse (403).
 * Which record a person may reach is decided a second time, in the services (404).
 */
export const PERMISSIONS = {
  therapist: [
    'home:read', 'patient:read', 'patient:write', 'care-team:write', 'opening:create', 'consent:write', 'member:read',
    'session:read', 'session:write', 'clip:read', 'clip:write', 'still:write', 'marking:read', 'marking:write',
    'measure:compute', 'timeline:read',
  ],
  student: ['measure:compute'],
  patient: ['timeline:read'],
  administrator: ['patient:read', 'opening:create', 'timeline:read', 'session:read', 'member:read', 'audit:read'],
} as const satisfies Record<Role, readonly string[]>

export type Permission = typeof PERMISSIONS[Role][number]

/** @returns whether any of the roles holds the permission. */
export function rolesMay(roles: readonly Role[], permission: Permission): boolean {
  return roles.some(role => PERMISSIONS[role].some(held => held === permission))
}

/** What a person comes for. One person can hold more than one role. */
export const ROLES = ['therapist', 'student', 'patient', 'administrator'] as const
export type Role = typeof ROLES[number]

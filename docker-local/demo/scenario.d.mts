export interface DemoVisit {
  daysAgo: number
  support: number
  assistance: string
  helpers: number
  seconds: number[]
  by: string
  exertion?: number[]
  buckles?: number[]
  notes?: string
  cues?: string
  clips?: { file: string, bout: number | null, status?: 'draft' | 'final', markedBy?: string }[]
}
export interface DemoPatient { key: string, name: string, recordNumber: string, at: string, team: string[], visits: DemoVisit[] }
export interface DemoClinic { key: string, name: string, timeZone: string, units: string, members: { key: string, email: string, name: string, roles: string[] }[], patients: DemoPatient[] }
export const PASSWORD: string
export const CLINICS: DemoClinic[]
export const CHECKLIST: string[]

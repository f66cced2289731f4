export function momentIn(timeZone: string, day: string, time: string): Date
export function dayIn(timeZone: string, moment: Date): string
export function machineTimeZone(): string
export function visitStart(place: { timeZone: string, since: Date }, daysAgo: number, time: string): Date
export function daysBefore(day: string, days: number): string
export function birthDateFor(day: string, age: number, birthday: string): string

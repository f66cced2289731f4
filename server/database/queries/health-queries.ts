import { sql } from 'drizzle-orm'
import type { Transaction } from '../client'

/** @returns whether jobs are taken: none has been due for longer than `seconds` without being started. */
export async function areJobsTaken(tx: Transaction, seconds: number): Promise<boolean> {
  const result = await tx.execute<{ waiting: number }>(sql`
    select count(*)::int as waiting from pgboss.job
    where state in ('created', 'retry') and name not like '%.dead' and start_after < now() - make_interval(secs => ${seconds})`)
  return result.rows[0]?.waiting === 0
}

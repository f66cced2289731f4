import { afterAll, describe, expect, it } from 'vitest'
import { PatientListSchema } from '#shared/schemas/patient'
import { expectBody } from '../fixtures/api/answers'
import { closeDatabase, inTransaction, listTables, query, refusalOf } from '../fixtures/api/database'
import { makeClinic, makeTherapist, unique, type Person } from '../fixtures/api/people'
import { makeBout, makeConsent, makeMarking, makePatient, makeSession, makeStill } from '../fixtures/api/records'

afterAll(closeDatabase)

/** A clinic with something in every table. */
async function fill(word: string) {
  const person = await makeTherapist(await makeClinic(word))
  const patient = await makePatient(person)
  await makeConsent(person, patient.id)
  const session = await makeSession(person, patient.id)
  await makeBout(person, session.id)
  const place = await makeStill(person, session)
  await makeMarking(person, place.stillId)
  await person.client.post(`/api/patients/${patient.id}/openings`, { reason: 'So that a row is there' }, { idempotencyKey: unique('key') })
  await query(person.clinic.id, 'insert into clip_frame_table (clip_id, clinic_id, times_us, key_frames, key_offsets) values ($1, $2, array[0, 33333], array[0], array[0])', [place.clipId, person.clinic.id])
  return { person, clinicId: person.clinic.id, patient, session, ...place }
}

const [a, b] = [await fill('row-security-a'), await fill('row-security-b')]
const tables = await listTables()
/** Tables without a clinic of their own, each with its reason. Every other table must name its clinic. */
const WITHOUT_CLINIC = ['clinic', 'sign_in_attempt']
const INSUFFICIENT_PRIVILEGE = '42501'

async function catalog<Row extends Record<string, unknown>>(text: string): Promise<Row[]> {
  return query<Row>(a.clinicId, text)
}

async function countAs(clinicId: string | undefined, text: string): Promise<number> {
  return inTransaction({ as: 'app', clinicId }, async client => (await client.query<{ count: number }>(text)).rows[0]?.count ?? Number.NaN)
}

const withClinic = (await catalog<{ name: string }>('select table_name::text as name from information_schema.columns where table_schema = \'public\' and column_name = \'clinic_id\'')).map(row => row.name)
const readable = (await catalog<{ name: string }>('select relname::text as name from pg_class where relnamespace = \'public\'::regnamespace and relkind in (\'r\', \'p\') and has_table_privilege(\'standmark_app\', oid, \'select\')')).map(row => row.name)

describe('every table', () => {
  it('names its clinic, or stands in the short list of those that cannot', () => {
    expect(tables.filter(name => !withClinic.includes(name))).toEqual(WITHOUT_CLINIC)
  })

  it('has row-level security on and forced, so that it binds the owner too', async () => {
    const rows = await catalog<{ name: string, isOn: boolean, isForced: boolean }>('select relname::text as name, relrowsecurity as "isOn", relforcerowsecurity as "isForced" from pg_class where relnamespace = \'public\'::regnamespace and relkind in (\'r\', \'p\') order by relname')
    expect(rows).toEqual(tables.map(name => ({ name, isOn: true, isForced: true })))
  })

  it('has exactly one policy for everybody, on the clinic, for reading and writing', async () => {
    const rows = await catalog<{ name: string, command: string, using: string, check: string }>('select tablename::text as name, cmd as command, qual as using, with_check as check from pg_policies where schemaname = \'public\' and \'public\' = any(roles) order by tablename')
    expect(rows).toEqual(tables.filter(name => name !== 'sign_in_attempt').map((name) => {
      const rule = `(${name === 'clinic' ? 'id' : 'clinic_id'} = current_clinic())`
      return { name, command: 'ALL', using: rule, check: rule }
    }))
  })

  it('has no policy that names the server\'s role', async () => {
    expect(await catalog('select tablename, policyname from pg_policies where roles && array[\'standmark_app\']::name[]')).toEqual([])
  })

  it('has its clinic first in the keys that point across tables, so that no row points into another clinic', async () => {
    const rows = await catalog<{ name: string }>(`
      select con.conname::text as name from pg_constraint con
      join pg_class source on source.oid = con.conrelid join pg_class target on target.oid = con.confrelid
      where con.contype = 'f' and con.connamespace = 'public'::regnamespace and target.relname <> 'clinic'
        and not exists (select 1 from pg_attribute att where att.attrelid = source.oid and att.attnum = any(con.conkey) and att.attname = 'clinic_id')`)
    // A reading's second key leads to the same marking with its clinic (reading_marking).
    expect(rows.map(row => row.name)).toEqual(['reading_marking_version'])
  })
})

describe('the server\'s role without a clinic', () => {
  it.each(readable)('sees no row of %s', async (table) => {
    expect(await countAs(undefined, `select count(*)::int as count from ${table}`)).toBe(0)
  })

  it('sees no row with an empty clinic either, as a pooled connection has it after a transaction', async () => {
    expect(await countAs('', 'select count(*)::int as count from patient')).toBe(0)
  })

  it('cannot read the sign-in attempts at all', async () => {
    expect(readable).not.toContain('sign_in_attempt')
    expect(tables.filter(name => !readable.includes(name))).toEqual(['sign_in_attempt'])
  })

  it('writes nothing', async () => {
    expect(await refusalOf({ as: 'app' }, 'insert into audit_event (id, clinic_id, action, target_type, request_id) values (gen_random_uuid(), $1, \'x\', \'x\', \'x\')', [a.clinicId])).toBe(INSUFFICIENT_PRIVILEGE)
  })
})

describe('the server\'s role in clinic A', () => {
  it.each(readable)('sees its own rows of %s and none of clinic B', async (table) => {
    const column = table === 'clinic' ? 'id' : 'clinic_id'
    expect(await countAs(a.clinicId, `select count(*)::int as count from ${table}`)).toBeGreaterThan(0)
    expect(await countAs(a.clinicId, `select count(*)::int as count from ${table} where ${column} <> '${a.clinicId}'`)).toBe(0)
    expect(await countAs(b.clinicId, `select count(*)::int as count from ${table} where ${column} = '${b.clinicId}'`)).toBeGreaterThan(0)
  })

  it.each(withClinic)('writes no row of clinic B into %s', async (table) => {
    const [row] = await query<{ row: unknown }>(b.clinicId, `select to_jsonb(t) as row from ${table} t where clinic_id = $1 limit 1`, [b.clinicId])
    const insert = `insert into ${table} select * from jsonb_populate_record(null::${table}, $1)`
    expect(row).toBeDefined()
    expect(await refusalOf({ as: 'app', clinicId: a.clinicId }, insert, [JSON.stringify(row?.row)])).toBe(INSUFFICIENT_PRIVILEGE)
  })

  it('moves no row of its own into clinic B', async () => {
    const updatable = (await catalog<{ name: string }>('select relname::text as name from pg_class where relnamespace = \'public\'::regnamespace and relkind = \'r\' and has_table_privilege(\'standmark_app\', oid, \'update\')')).map(row => row.name)
    expect(updatable.length).toBeGreaterThan(5)
    for (const table of updatable) {
      // The consent's own trigger is asked before the policy.
      expect(['23001', INSUFFICIENT_PRIVILEGE], table).toContain(await refusalOf({ as: 'app', clinicId: a.clinicId }, `update ${table} set clinic_id = $1`, [b.clinicId]))
    }
  })

  it('changes and deletes no row of clinic B', async () => {
    const touched = await inTransaction({ as: 'app', clinicId: a.clinicId }, async client => [
      (await client.query('update patient set name = \'x\' where id = $1', [b.patient.id])).rowCount,
      (await client.query('delete from care_team_member where patient_id = $1', [b.patient.id])).rowCount,
      (await client.query('update sign_in_session set revoked_at = now() where clinic_id = $1', [b.clinicId])).rowCount,
    ])
    expect(touched).toEqual([0, 0, 0])
  })

  it('points from no row of its own into clinic B', async () => {
    const refused = (text: string, values: unknown[]) => refusalOf({ as: 'app', clinicId: a.clinicId }, text, values)
    expect(await refused('insert into session (id, clinic_id, patient_id, started_at, created_by_id) values (gen_random_uuid(), $1, $2, now(), $3)', [a.clinicId, b.patient.id, a.person.id])).toBe('23503')
    expect(await refused('insert into care_team_member (clinic_id, patient_id, user_id) values ($1, $2, $3)', [a.clinicId, a.patient.id, b.person.id])).toBe('23503')
    expect(await refused('insert into bout (id, clinic_id, patient_id, session_id, started_at, assistance) values (gen_random_uuid(), $1, $2, $3, now(), \'partial\')', [a.clinicId, a.patient.id, b.session.id])).toBe('23503')
    expect(await refused('insert into marking (id, clinic_id, patient_id, still_id, author_id) values (gen_random_uuid(), $1, $2, $3, $4)', [a.clinicId, a.patient.id, b.stillId, a.person.id])).toBe('23503')
  })

  it('leaves its clinic with the transaction: the next user of the connection sees nothing', async () => {
    await inTransaction({ as: 'app', clinicId: a.clinicId }, client => client.query('select 1'))
    for (let round = 0; round < 4; round++) expect(await countAs(undefined, 'select count(*)::int as count from patient')).toBe(0)
  })
})

describe('the server\'s role', () => {
  it('has no right that would lift it over the wall', async () => {
    expect(await catalog('select rolsuper, rolbypassrls, rolcreaterole, rolcreatedb, rolreplication from pg_roles where rolname = \'standmark_app\''))
      .toEqual([{ rolsuper: false, rolbypassrls: false, rolcreaterole: false, rolcreatedb: false, rolreplication: false }])
    expect(await catalog('select rolcanlogin, rolsuper, rolbypassrls from pg_roles where rolname = \'standmark_auth\'')).toEqual([{ rolcanlogin: false, rolsuper: false, rolbypassrls: false }])
  })

  it('owns nothing and belongs to no other role', async () => {
    expect(await catalog('select relname from pg_class where relowner = \'standmark_app\'::regrole union all select proname from pg_proc where proowner = \'standmark_app\'::regrole union all select nspname from pg_namespace where nspowner = \'standmark_app\'::regrole')).toEqual([])
    expect(await catalog('select roleid::regrole::text from pg_auth_members where member = \'standmark_app\'::regrole')).toEqual([])
  })

  it.each([
    'create table stolen (id int)', 'create table pgboss.stolen (id int)', 'create function stolen() returns int language sql as \'select 1\'', 'alter table patient disable row level security', 'alter table patient no force row level security',
    'drop policy patient_clinic on patient', 'create policy everything on patient using (true)', 'drop table patient', 'truncate patient cascade', 'set role standmark_auth', 'set role standmark_owner',
    'alter role standmark_app bypassrls', 'create role stolen', 'create schema stolen', 'alter function current_clinic() rename to stolen', 'select * from sign_in_attempt',
  ])('is refused: %s', async (statement) => {
    expect(await refusalOf({ as: 'app', clinicId: a.clinicId }, statement)).toBe(INSUFFICIENT_PRIVILEGE)
  })

  it('deletes no record of care', async () => {
    for (const table of ['patient', 'session', 'bout', 'consent', 'marking', 'user_account', 'chart_opening', 'clinic']) {
      expect(await refusalOf({ as: 'app', clinicId: a.clinicId }, `delete from ${table}`), table).toBe(INSUFFICIENT_PRIVILEGE)
    }
  })
})

describe('the functions that run before the clinic is known', () => {
  it('belong to a role nobody signs in as, look names up in our schema alone, and are open to the server only', async () => {
    const rows = await catalog<{ name: string, owner: string, config: string[] | null, isPublic: boolean }>(`
      select p.proname::text as name, p.proowner::regrole::text as owner, p.proconfig as config, has_function_privilege('public', p.oid, 'execute') as "isPublic"
      from pg_proc p where p.pronamespace = 'public'::regnamespace and p.prosecdef order by p.proname`)
    expect(rows.length).toBeGreaterThan(0)
    for (const row of rows) expect(row).toEqual({ name: row.name, owner: 'standmark_auth', config: ['search_path=public, pg_temp'], isPublic: false })
  })
})

describe('two clinics at the same moment on the same connections', () => {
  it('see their own patients and never the other\'s', async () => {
    const ask = async (person: Person) => expectBody(await person.client.get('/api/patients?pageSize=200'), 200, PatientListSchema).items.map(item => item.id)
    const answers = await Promise.all(Array.from({ length: 120 }, (_, index) => ask(index % 2 ? a.person : b.person)))
    answers.forEach((ids, index) => expect(ids).toEqual([(index % 2 ? a : b).patient.id]))
  })
})

import { Agent, request } from 'node:http'
import pg from 'pg'
import { interleave, report } from './measuring.mjs'

const CONNECTIONS = 16
const ROUND_MS = 4000

/** Keeps `CONNECTIONS` pieces of work going for a round. @returns how many were done in a second */
async function rateOf(work) {
  const until = performance.now() + ROUND_MS
  let done = 0
  await Promise.all(Array.from({ length: CONNECTIONS }, async () => {
    while (performance.now() < until) {
      await work()
      done += 1
    }
  }))
  return done * 1000 / ROUND_MS
}

function asker(baseUrl, cookie) {
  const agent = new Agent({ keepAlive: true, maxSockets: CONNECTIONS })
  return (path, expected = 200) => () => new Promise((resolve, reject) => {
    const asked = request(new URL(path, baseUrl), { agent, headers: { cookie } }, (answer) => {
      answer.resume()
      answer.on('end', () => answer.statusCode === expected ? resolve() : reject(new Error(`${path}: ${answer.statusCode}`)))
    })
    asked.on('error', reject)
    asked.end()
  })
}

/** The queries of both routes as they stand in server/database/queries, with what the rules add to them, and nothing around. */
function bareQueries(pool, clinicId, userId, patientId) {
  const inClinic = work => async () => {
    const client = await pool.connect()
    try {
      await client.query(`begin read only; select set_config('app.clinic_id', '${clinicId}', true)`)
      await work(client)
      await client.query('commit')
    } finally {
      client.release()
    }
  }
  return {
    patients: inClinic(client => client.query(
      `select p.*, (select max(extract(epoch from b.ended_at - b.started_at)) * 1000 from bout b where b.clinic_id = p.clinic_id and b.patient_id = p.id) as longest
       from patient p where exists (select 1 from care_team_member m where m.patient_id = p.id and m.user_id = $1) order by lower(p.name) limit 50`, [userId])),
    timeline: inClinic(async (client) => {
      await client.query(
        `select r.*, coalesce(c.recorded_at, s.started_at) as at from reading r join marking m on m.id = r.marking_id and m.final_version = r.marking_version
         join still t on t.id = m.still_id join clip c on c.id = t.clip_id join session s on s.id = c.session_id where r.patient_id = $1 order by 2`, [patientId])
      await client.query('select b.*, s.mass_kg from bout b join session s on s.id = b.session_id where b.patient_id = $1 order by b.started_at', [patientId])
    }),
  }
}

/** `GET /api/patients` and the timeline beside a route that does nothing, and beside the bare queries over a pool of the same size. */
export async function benchRequests({ baseUrl, cookie, databaseUrl, clinicId, userId, patientId }) {
  const ask = asker(baseUrl, cookie)
  const pool = new pg.Pool({ connectionString: databaseUrl, max: 10 })
  const bare = bareQueries(pool, clinicId, userId, patientId)
  try {
    for (const [name, path, query] of [['patients', '/api/patients', bare.patients], ['timeline', `/api/patients/${patientId}/timeline`, bare.timeline]]) {
      const besideRoute = await interleave(3, () => rateOf(ask(path)), () => rateOf(ask('/api/nothing-here', 404)))
      report(`GET ${name} beside a route that does nothing`, besideRoute, `${Math.round(besideRoute.a)} and ${Math.round(besideRoute.b)} a second`)
      const besideQuery = await interleave(3, () => rateOf(ask(path)), () => rateOf(query))
      report(`GET ${name} beside the bare query`, besideQuery, `${Math.round(besideQuery.a)} and ${Math.round(besideQuery.b)} a second`, 'target at least 0.3')
    }
  } finally {
    await pool.end()
  }
}

import { authoriseUser, changeUser, disableUser, enableUser, listUsers } from '@weirlight/shared/contracts'
import { beforeEach, describe, expect, it } from 'vitest'
import { aPersonWithPassphrase } from '../../testing/accounts.js'
import type { Agent } from '../../testing/agent.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { anInvited, reason, versionOf } from './accounts.test-support.js'
import { AuthorisationService } from './authorisation.service.js'
import { UsersModule } from './users.module.js'

const at = useTestApp({ imports: [UsersModule, LaboratoryModule] })

let administrator: Awaited<ReturnType<typeof aUser>>
let agent: Agent

beforeEach(async () => {
  administrator = await aUser(at().database.db, { role: 'administrator', name: 'Ada Admin' })
  agent = await at().as(administrator)
})

describe('an account', () => {
  it('that is disabled loses its sessions at once, and comes back when enabled', async () => {
    const person = await aPersonWithPassphrase(at(), { role: 'auditor' })
    const session = await at().as(person)
    await session.call(listUsers, {})
    const disabled = await agent.call(disableUser, {
      params: { id: person.userId },
      body: { version: await versionOf(agent, person.userId), reason },
    })
    expect(disabled.status).toBe('disabled')
    expect((await session.refused(listUsers, {})).code).toBe('signed-out')
    const enabled = await agent.call(enableUser, {
      params: { id: person.userId },
      body: { version: disabled.version, reason },
    })
    expect(enabled.status).toBe('active')
    expect((await session.refused(listUsers, {})).code).toBe('signed-out')
  })

  it('changed by two at once keeps the first change and tells the second whose it was', async () => {
    const user = await anInvited(agent)
    const other = await at().as(await aUser(at().database.db, { role: 'administrator', name: 'Ben Admin' }))
    const body = { version: user.version, name: 'Nora Next', role: 'auditor' as const }
    const sent = await Promise.all(
      [agent, other].map((one) => one.send(changeUser, { params: { id: user.id }, body })),
    )
    const lost = oneWins(sent)
    expect(lost.code).toBe('stale')
    expect(['Ada Admin', 'Ben Admin']).toContain(lost.conflict?.changedBy)
  })

  it('that changes its role begins again with a sign-in', async () => {
    const person = await aPersonWithPassphrase(at(), { role: 'auditor' })
    const session = await at().as(person)
    await agent.call(changeUser, {
      params: { id: person.userId },
      body: { version: await versionOf(agent, person.userId), name: person.name, role: 'technician', reason },
    })
    expect((await session.refused(listUsers, {})).code).toBe('signed-out')
  })

  it('of one’s own is neither disabled nor demoted', async () => {
    const params = { id: administrator.userId }
    const version = await versionOf(agent, administrator.userId)
    await aUser(at().database.db, { role: 'administrator' })
    expect((await agent.refused(disableUser, { params, body: { version, reason } })).code).toBe(
      'not-allowed-now',
    )
    const body = { version, name: 'Ada', role: 'auditor' as const }
    expect((await agent.refused(changeUser, { params, body })).code).toBe('not-allowed-now')
  })

  it('of the last administrator stays, also when two disable each other at the same moment', async () => {
    const { db, owner } = at().database
    await owner.transaction(administrator, 'user.disable', 'test', (trx) =>
      trx
        .updateTable('users')
        .set({ status: 'disabled' })
        .where('role', '=', 'administrator')
        .where('id', '!=', administrator.userId)
        .execute(),
    )
    const second = await aUser(db, { role: 'administrator' })
    const other = await at().as(second)
    const sent = await Promise.all([
      agent.send(disableUser, { params: { id: second.userId }, body: { version: 1, reason } }),
      other.send(disableUser, { params: { id: administrator.userId }, body: { version: 1, reason } }),
    ])
    expect(sent.filter(({ status }) => status === 200)).toHaveLength(1)
    const { rows } = await owner.pool.query(
      `select 1 from users where role = 'administrator' and status = 'active'`,
    )
    expect(rows).toHaveLength(1)
  })

  it('is seen by QA and the auditor, changed by the administrator alone', async () => {
    const { db } = at().database
    const user = await anInvited(agent)
    for (const role of ['technician', 'qa-manager', 'auditor', 'client'] as const) {
      const one = await at().as(await aUser(db, { role }))
      const problem = await one.refused(disableUser, {
        params: { id: user.id },
        body: { version: 1, reason },
      })
      expect(problem.code).toBe('forbidden')
    }
    await (await at().as(await aUser(db, { role: 'auditor' }))).call(listUsers, {})
    expect((await (await at().as(await aUser(db))).refused(listUsers, {})).code).toBe('forbidden')
  })
})

describe('an authorisation', () => {
  it('holds between its days, for its method and activity', async () => {
    const { db } = at().database
    const person = await aUser(db)
    const methodId = await db.transaction(person, 'method.load', null, async (trx) => {
      const { id } = await trx
        .insertInto('methods')
        .values({
          code: 'fe-test',
          edition: '1',
          title: 'Iron, test',
          analyte: 'Fe',
          form: 'total',
          wavelengthNm: '510',
          definition: '{}',
        })
        .returning('id')
        .executeTakeFirstOrThrow()
      return id
    })
    const authorisations = at().get(AuthorisationService)
    const asked = { userId: person.userId, methodId, activity: 'read' as const }
    await expect(authorisations.requireAuthorised(db.read, asked)).rejects.toThrow(
      /not authorised to measure by “Iron, test”/,
    )
    const params = { id: person.userId }
    const evidence = 'Two supervised runs'
    const past = {
      methodId,
      activity: 'read' as const,
      validFrom: '2020-01-01',
      validUntil: '2020-12-31',
      evidence,
    }
    await agent.call(authoriseUser, { params, body: past })
    await expect(authorisations.requireAuthorised(db.read, asked)).rejects.toThrow(/ended on 2020-12-31/)
    const user = await agent.call(authoriseUser, { params, body: { ...past, validUntil: '2099-12-31' } })
    expect(user.authorisations.map(({ inForce }) => inForce)).toEqual([true, false])
    await authorisations.requireAuthorised(db.read, asked)
    await expect(authorisations.requireAuthorised(db.read, { ...asked, activity: 'review' })).rejects.toThrow(
      /review results/,
    )
    const backwards = { ...past, validFrom: '2020-12-31', validUntil: '2020-01-01' }
    expect((await agent.refused(authoriseUser, { params, body: backwards })).errors?.[0]?.path).toBe(
      'validUntil',
    )
  })
})

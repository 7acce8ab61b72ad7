import {
  acceptInvitation,
  authoriseUser,
  changeUser,
  disableUser,
  enableUser,
  forgotPassphrase,
  getInvitation,
  getLaboratory,
  inviteUser,
  inviteUserAgain,
  listUsers,
  resetPassphrase,
  signIn,
  startPassphraseReset,
} from '@weirlight/shared/contracts'
import { beforeEach, describe, expect, it } from 'vitest'
import { LaboratoryModule } from '../laboratory/index.js'
import { aPersonWithPassphrase, PASSPHRASE } from '../../testing/accounts.js'
import type { Agent } from '../../testing/agent.js'
import { aClient, aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { AuthorisationService } from './authorisation.service.js'
import { FirstAdministratorService } from './first-administrator.service.js'
import { UsersModule } from './users.module.js'

const at = useTestApp({ imports: [UsersModule, LaboratoryModule] })
const NEW = 'twelve quiet herons eat soup'
const reason = 'for this test'

let administrator: Awaited<ReturnType<typeof aUser>>
let agent: Agent
let count = 0

async function lastLinkTo(email: string): Promise<string> {
  const { rows } = await at().database.owner.pool.query<{ body_text: string }>(
    'select body_text from mail_messages where recipient = $1 order by id desc limit 1',
    [email],
  )
  return /\/(?:invitation|reset)\/([\w-]+)/.exec(rows[0]?.body_text ?? '')?.[1] ?? ''
}

async function mailsTo(email: string): Promise<string[]> {
  const { rows } = await at().database.owner.pool.query<{ subject: string }>(
    'select subject from mail_messages where recipient = $1 order by id',
    [email],
  )
  return rows.map(({ subject }) => subject)
}

function anInvited(changes: Record<string, unknown> = {}) {
  count += 1
  return agent.call(inviteUser, {
    body: { email: `new-${count}@people.example`, name: 'Nora New', role: 'technician', ...changes },
  })
}

async function versionOf(userId: string): Promise<number> {
  const { items } = await agent.call(listUsers, {})
  return items.find(({ id }) => id === userId)?.version ?? 0
}

beforeEach(async () => {
  administrator = await aUser(at().database.db, { role: 'administrator', name: 'Ada Admin' })
  agent = await at().as(administrator)
})

describe('an invitation', () => {
  it('goes out by mail, says what it is for, and lets its reader choose a passphrase once', async () => {
    const user = await anInvited()
    expect(user).toMatchObject({ status: 'invited', role: 'technician', lastSignedInAt: null })
    const token = await lastLinkTo(user.email)
    const anonymous = at().anonymous()
    expect(await anonymous.call(getInvitation, { params: { token } })).toMatchObject({
      email: user.email,
      role: 'technician',
    })
    const body = { name: 'Nora Newman', passphrase: NEW }
    const tries = await Promise.all(
      [1, 2].map(() => anonymous.send(acceptInvitation, { params: { token }, body })),
    )
    expect(tries.map(({ status }) => status).sort()).toEqual([204, 404])
    expect((await anonymous.refused(getInvitation, { params: { token } })).code).toBe('not-found')
    const session = await anonymous.call(signIn, { body: { email: user.email, password: NEW } })
    expect(session.name).toBe('Nora Newman')
  })

  it('is worth nothing once a newer one is sent, or when it ran out', async () => {
    const user = await anInvited()
    const first = await lastLinkTo(user.email)
    await agent.call(inviteUserAgain, { params: { id: user.id }, body: { version: user.version } })
    const second = await lastLinkTo(user.email)
    expect(second).not.toBe(first)
    expect(
      (
        await at()
          .anonymous()
          .refused(getInvitation, { params: { token: first } })
      ).code,
    ).toBe('not-found')
    await at().database.owner.pool.query(
      `update user_tokens set expires_at = now() - interval '1 second' where user_id = $1`,
      [user.id],
    )
    expect(
      (
        await at()
          .anonymous()
          .refused(getInvitation, { params: { token: second } })
      ).code,
    ).toBe('not-found')
  })

  it('is not sent twice to one address, also when two administrators invite at once', async () => {
    const body = { email: 'twice@people.example', name: 'Two', role: 'technician' as const }
    const sent = await Promise.all([1, 2].map(() => agent.send(inviteUser, { body })))
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
    const refused = sent.find(({ status }) => status === 409)?.json as {
      code: string
      errors: { path: string }[]
    }
    expect(refused.code).toBe('already-exists')
    expect(refused.errors[0]?.path).toBe('email')
  })

  it('of a client names the utility; a client without one is refused on the field', async () => {
    const client = await aClient(at().database.db)
    const user = await anInvited({ role: 'client', clientId: client.id })
    expect(user.clientName).toBe(client.name)
    const problem = await agent.refused(inviteUser, {
      body: { email: 'c@people.example', name: 'C', role: 'client' },
    })
    expect(problem.errors?.[0]?.path).toBe('clientId')
  })

  it.each([
    ['too short', 'brown otters'],
    ['repeated', 'otterotterotterotter'],
    ['common', 'CorrectHorseBatteryStaple'],
    ['the keyboard', 'qwertyuiopasdfghjkl'],
    ['the name and the address', 'Nora.New.people.example1'],
  ])('refuses a passphrase that is %s', async (_, passphrase) => {
    const user = await anInvited()
    const token = await lastLinkTo(user.email)
    const body = { name: 'Nora New', passphrase }
    const problem = await at().anonymous().refused(acceptInvitation, { params: { token }, body })
    expect(problem.code).toBe('invalid-input')
    expect(problem.errors?.map(({ path }) => path)).toEqual(['passphrase'])
  })
})

describe('a new passphrase', () => {
  it('by the link ends every session and every other link, and is told by mail', async () => {
    const person = await aPersonWithPassphrase(at(), { role: 'auditor' })
    const session = await at().as(person)
    const anonymous = at().anonymous()
    await anonymous.call(forgotPassphrase, { body: { email: person.email } })
    const token = await lastLinkTo(person.email)
    await anonymous.call(resetPassphrase, { body: { token, passphrase: NEW } })

    expect((await session.refused(listUsers, {})).code).toBe('signed-out')
    const again = await anonymous.refused(resetPassphrase, { body: { token, passphrase: `${NEW} again` } })
    expect(again.code).toBe('not-found')
    const old = await anonymous.refused(signIn, { body: { email: person.email, password: PASSPHRASE } })
    expect(old.code).toBe('wrong-passphrase')
    await anonymous.call(signIn, { body: { email: person.email, password: NEW } })
    expect((await mailsTo(person.email)).at(-1)).toContain('was changed')
    const { rows } = await at().database.owner.pool.query<{ new: Record<string, unknown> }>(
      `select new from history where action = 'user.reset-passphrase' and thing_id = $1`,
      [person.userId],
    )
    expect(rows[0]?.new['password_hash']).toBe('(hidden)')
  })

  it('is started by an administrator and chosen by the person alone', async () => {
    const person = await aPersonWithPassphrase(at())
    await agent.call(startPassphraseReset, {
      params: { id: person.userId },
      body: { version: await versionOf(person.userId), reason },
    })
    // the old one holds until the link is used
    await at()
      .anonymous()
      .call(signIn, { body: { email: person.email, password: PASSPHRASE } })
    const token = await lastLinkTo(person.email)
    await at()
      .anonymous()
      .call(resetPassphrase, { body: { token, passphrase: NEW } })
    await at()
      .anonymous()
      .call(signIn, { body: { email: person.email, password: NEW } })
  })

  it('sends no more than three links an hour to one mailbox', async () => {
    const person = await aPersonWithPassphrase(at())
    const anonymous = at().anonymous()
    for (let i = 0; i < 5; i += 1) await anonymous.call(forgotPassphrase, { body: { email: person.email } })
    expect(await mailsTo(person.email)).toHaveLength(3)
    expect((await anonymous.refused(forgotPassphrase, { body: { email: person.email } })).code).toBe(
      'throttled',
    )
  })
})

describe('an account', () => {
  it('that is disabled loses its sessions at once, and comes back when enabled', async () => {
    const person = await aPersonWithPassphrase(at(), { role: 'auditor' })
    const session = await at().as(person)
    await session.call(listUsers, {})
    const disabled = await agent.call(disableUser, {
      params: { id: person.userId },
      body: { version: await versionOf(person.userId), reason },
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
    const user = await anInvited()
    const other = await at().as(await aUser(at().database.db, { role: 'administrator', name: 'Ben Admin' }))
    const body = { version: user.version, name: 'Nora Next', role: 'auditor' as const }
    const sent = await Promise.all(
      [agent, other].map((one) => one.send(changeUser, { params: { id: user.id }, body })),
    )
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
    const lost = sent.find(({ status }) => status === 409)?.json as {
      code: string
      conflict: { changedBy: string }
    }
    expect(lost.code).toBe('stale')
    expect(['Ada Admin', 'Ben Admin']).toContain(lost.conflict.changedBy)
  })

  it('that changes its role begins again with a sign-in', async () => {
    const person = await aPersonWithPassphrase(at(), { role: 'auditor' })
    const session = await at().as(person)
    await agent.call(changeUser, {
      params: { id: person.userId },
      body: { version: await versionOf(person.userId), name: person.name, role: 'technician', reason },
    })
    expect((await session.refused(listUsers, {})).code).toBe('signed-out')
  })

  it('of one’s own is neither disabled nor demoted', async () => {
    const params = { id: administrator.userId }
    const version = await versionOf(administrator.userId)
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
    const user = await anInvited()
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

describe('the first administrator', () => {
  it('is invited from the server’s command line into a laboratory that is set up with it', async () => {
    const first = {
      email: 'first@people.example',
      name: 'Fay First',
      laboratory: { name: 'Fay’s', timeZone: 'Europe/Vienna' },
    }
    const link = await at().get(FirstAdministratorService).invite(first)
    const token = link.split('/').at(-1) ?? ''
    await at()
      .anonymous()
      .call(acceptInvitation, { params: { token }, body: { name: 'Fay First', passphrase: NEW } })
    const session = await at()
      .anonymous()
      .call(signIn, { body: { email: first.email, password: NEW } })
    expect(session).toMatchObject({
      role: 'administrator',
      laboratoryName: 'Fay’s',
      timeZone: 'Europe/Vienna',
    })
    expect((await agent.call(getLaboratory, {})).timeZone).toBe('Europe/Vienna')
    await expect(at().get(FirstAdministratorService).invite(first)).rejects.toThrow(
      /account for first@people.example/,
    )
  })
})

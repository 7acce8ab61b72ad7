import {
  acceptInvitation,
  getInvitation,
  getLaboratory,
  inviteUser,
  inviteUserAgain,
  signIn,
} from '@weirlight/shared/contracts'
import { beforeEach, describe, expect, it } from 'vitest'
import type { Agent } from '../../testing/agent.js'
import { oneWins } from '../../testing/one-wins.js'
import { aClient, aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { anInvited, lastLinkTo, NEW_PASSPHRASE } from './accounts.test-support.js'
import { FirstAdministratorService } from './first-administrator.service.js'
import { UsersModule } from './users.module.js'

const at = useTestApp({ imports: [UsersModule, LaboratoryModule] })

let agent: Agent

beforeEach(async () => {
  agent = await at().as(await aUser(at().database.db, { role: 'administrator' }))
})

describe('an invitation', () => {
  it('goes out by mail, says what it is for, and lets its reader choose a passphrase once', async () => {
    const user = await anInvited(agent)
    expect(user).toMatchObject({ status: 'invited', role: 'technician', lastSignedInAt: null })
    const token = await lastLinkTo(at(), user.email)
    const anonymous = at().anonymous()
    expect(await anonymous.call(getInvitation, { params: { token } })).toMatchObject({
      email: user.email,
      role: 'technician',
    })
    const body = { name: 'Nora Newman', passphrase: NEW_PASSPHRASE }
    const tries = await Promise.all(
      [1, 2].map(() => anonymous.send(acceptInvitation, { params: { token }, body })),
    )
    expect(tries.map(({ status }) => status).sort()).toEqual([204, 404])
    expect((await anonymous.refused(getInvitation, { params: { token } })).code).toBe('not-found')
    const session = await anonymous.call(signIn, { body: { email: user.email, password: NEW_PASSPHRASE } })
    expect(session.name).toBe('Nora Newman')
  })

  it('is worth nothing once a newer one is sent, or when it ran out', async () => {
    const user = await anInvited(agent)
    const first = await lastLinkTo(at(), user.email)
    await agent.call(inviteUserAgain, { params: { id: user.id }, body: { version: user.version } })
    const second = await lastLinkTo(at(), user.email)
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
    const refused = oneWins(sent)
    expect(refused.code).toBe('already-exists')
    expect(refused.errors?.[0]?.path).toBe('email')
  })

  it('of a client names the utility; a client without one is refused on the field', async () => {
    const client = await aClient(at().database.db)
    const user = await anInvited(agent, { role: 'client', clientId: client.id })
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
    const user = await anInvited(agent)
    const token = await lastLinkTo(at(), user.email)
    const body = { name: 'Nora New', passphrase }
    const problem = await at().anonymous().refused(acceptInvitation, { params: { token }, body })
    expect(problem.code).toBe('invalid-input')
    expect(problem.errors?.map(({ path }) => path)).toEqual(['passphrase'])
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
      .call(acceptInvitation, { params: { token }, body: { name: 'Fay First', passphrase: NEW_PASSPHRASE } })
    const session = await at()
      .anonymous()
      .call(signIn, { body: { email: first.email, password: NEW_PASSPHRASE } })
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

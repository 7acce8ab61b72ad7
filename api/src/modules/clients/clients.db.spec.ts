import {
  addClient,
  addContact,
  addPoint,
  changeClient,
  changeContact,
  changePoint,
  getClient,
  listClients,
  removeContact,
} from '@weirlight/shared/contracts'
import { beforeEach, describe, expect, it } from 'vitest'
import type { Agent } from '../../testing/agent.js'
import { oneWins } from '../../testing/one-wins.js'
import { aProgramme, aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { ClientsModule } from './clients.module.js'

const at = useTestApp({ imports: [ClientsModule] })
let agent: Agent
let count = 0

async function aClientOfOurs() {
  count += 1
  const { id: programmeId } = await aProgramme(at().database.db)
  const body = {
    code: `cl${count}`,
    name: `Utility ${count}`,
    systemId: 'X1',
    address: '1 Road',
    programmeId,
    agencyName: 'State',
    agencyPhone: '555-0100',
  }
  return { body, client: await agent.call(addClient, { body }) }
}

const contact = {
  name: 'Dora Desk',
  email: 'dora@utility.example',
  getsAlerts: true,
  getsCertificates: false,
}

async function mailsTo(recipient: string): Promise<string[]> {
  const { rows } = await at().database.owner.pool.query<{ body_text: string }>(
    'select body_text from mail_messages where recipient = $1 order by id',
    [recipient],
  )
  return rows.map(({ body_text: text }) => text)
}

beforeEach(async () => {
  agent = await at().as(await aUser(at().database.db, { role: 'qa-manager', name: 'Quentin A' }))
})

describe('a client', () => {
  it('is added, listed with its counts, and changed', async () => {
    const { body, client } = await aClientOfOurs()
    expect(client.code).toBe(body.code.toUpperCase())
    await agent.call(addContact, { params: { id: client.id }, body: contact })
    await agent.call(addPoint, { params: { id: client.id }, body: { code: 'p1', name: 'Tap', kind: 'tap' } })
    const row = (await agent.call(listClients, {})).items.find(({ id }) => id === client.id)
    expect(row).toMatchObject({ pointCount: 1, alertContactCount: 1, active: true })
    const { code: _, ...values } = body
    const changed = await agent.call(changeClient, {
      params: { id: client.id },
      body: { ...values, name: 'Renamed', version: client.version },
    })
    expect(changed).toMatchObject({ name: 'Renamed', version: 2 })
    expect(await agent.call(getClient, { params: { id: client.id } })).toEqual(changed)
  })

  it('keeps its code to itself, also when two add it at once', async () => {
    const { body } = await aClientOfOurs()
    const sent = await Promise.all(
      [1, 2].map(() => agent.send(addClient, { body: { ...body, code: 'SAME' } })),
    )
    oneWins(sent)
    const problem = await agent.refused(addClient, { body })
    expect(problem).toMatchObject({ code: 'already-exists', errors: [{ path: 'code' }] })
  })

  it('gets another programme only with a reason, and refuses a stale form', async () => {
    const { body, client } = await aClientOfOurs()
    const { code: _, ...values } = body
    const { id: programmeId } = await aProgramme(at().database.db)
    const params = { id: client.id }
    const next = { ...values, programmeId, version: 1 }
    expect((await agent.refused(changeClient, { params, body: next })).errors?.[0]?.path).toBe('reason')
    await agent.call(changeClient, { params, body: { ...next, reason: 'The State asked for it.' } })
    const stale = await agent.refused(changeClient, { params, body: { ...next, reason: 'again' } })
    expect(stale).toMatchObject({ code: 'stale', conflict: { changedBy: 'Quentin A' } })
    const unknown = { ...values, programmeId: '999999', version: 2, reason: 'none' }
    expect((await agent.refused(changeClient, { params, body: unknown })).errors?.[0]?.path).toBe(
      'programmeId',
    )
  })

  it('is read by the house, changed by QA and the administrator, and closed to clients', async () => {
    const { db } = at().database
    const { client } = await aClientOfOurs()
    const technician = await at().as(await aUser(db))
    await technician.call(getClient, { params: { id: client.id } })
    const body = { ...contact, email: 'other@utility.example' }
    expect((await technician.refused(addContact, { params: { id: client.id }, body })).code).toBe('forbidden')
    const other = await at().as(await aUser(db, { role: 'client' }))
    expect((await other.refused(listClients, {})).code).toBe('forbidden')
    expect((await agent.refused(getClient, { params: { id: '999999' } })).code).toBe('not-found')
  })
})

describe('a contact', () => {
  it('whose address changes is told at the old one', async () => {
    const { client } = await aClientOfOurs()
    const added = await agent.call(addContact, {
      params: { id: client.id },
      body: { ...contact, email: 'old@utility.example' },
    })
    const [{ id, version } = { id: '', version: 0 }] = added.contacts
    await agent.call(changeContact, {
      params: { id },
      body: { ...contact, email: 'old@utility.example', name: 'Dora D', version },
    })
    expect(await mailsTo('old@utility.example')).toEqual([])
    await agent.call(changeContact, {
      params: { id },
      body: { ...contact, email: 'new@utility.example', version: version + 1 },
    })
    const [mail] = await mailsTo('old@utility.example')
    expect(mail).toContain('new@utility.example')
    expect(mail).toContain('Quentin A')
    expect(await mailsTo('new@utility.example')).toEqual([])
  })

  it('that is removed is told so, and is gone for whoever comes second', async () => {
    const { client } = await aClientOfOurs()
    const email = 'leaver@utility.example'
    const added = await agent.call(addContact, { params: { id: client.id }, body: { ...contact, email } })
    const [{ id, version } = { id: '', version: 0 }] = added.contacts
    const body = { version, reason: 'left the utility' }
    const sent = await Promise.all([1, 2].map(() => agent.send(removeContact, { params: { id }, body })))
    oneWins(sent)
    expect(await mailsTo(email)).toHaveLength(1)
    expect((await agent.call(getClient, { params: { id: client.id } })).contacts).toEqual([])
  })

  it('is kept once for each address', async () => {
    const { client } = await aClientOfOurs()
    const params = { id: client.id }
    const body = { ...contact, email: 'once@utility.example' }
    const sent = await Promise.all([1, 2].map(() => agent.send(addContact, { params, body })))
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 422])
  })
})

describe('a sampling point', () => {
  it('keeps its code, and may be taken out of use', async () => {
    const { client } = await aClientOfOurs()
    const params = { id: client.id }
    const body = { code: 'RES-1', name: 'Reservoir', kind: 'treated' as const }
    const added = await agent.call(addPoint, { params, body })
    expect((await agent.refused(addPoint, { params, body })).errors?.[0]?.path).toBe('code')
    const [point] = added.points
    if (!point) throw new Error('no point')
    const move = { name: 'Old reservoir', kind: point.kind, active: false, version: point.version }
    const sent = await Promise.all(
      [1, 2].map(() => agent.send(changePoint, { params: { id: point.id }, body: move })),
    )
    oneWins(sent)
    expect((await agent.call(getClient, { params })).points[0]).toMatchObject({
      code: 'RES-1',
      active: false,
    })
  })
})

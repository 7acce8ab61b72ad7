import { getToday } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { expect, it } from 'vitest'
import { aLot } from '../../testing/builders/bench.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'

// A laboratory on its first day: one administrator, and nothing else (constructed).
const at = useTestApp()
const stepsOf = async (actor: Actor) =>
  (await (await at().as(actor)).call(getToday, {})).lines
    .filter(({ kind }) => kind === 'set-up')
    .map(({ title }) => title)

it('tells each person what is missing, until it is there', async () => {
  const administrator = await aUser(at().database.db, { role: 'administrator' })
  expect(await stepsOf(administrator)).toEqual([
    'No technician has an account yet',
    'No QA manager has an account yet',
  ])

  const manager = await aUser(at().database.db, { role: 'qa-manager' })
  expect(await stepsOf(administrator)).toEqual(['No technician has an account yet'])
  expect(await stepsOf(manager)).toEqual([
    'No client is recorded yet',
    'Nobody is authorised yet',
    'No instrument is recorded yet',
    'No reagent or standard is recorded yet',
  ])

  const technician = await aUser(at().database.db, { role: 'technician' })
  expect(await stepsOf(administrator)).toEqual([])
  await aLot(at().database)
  // a calibration is not asked for before it can be made
  expect(await stepsOf(technician)).toEqual(['No instrument is recorded yet'])
})

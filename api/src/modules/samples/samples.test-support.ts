import type { Agent } from '../../testing/agent.js'
import { aUser } from '../../testing/people.js'
import type { TestApp } from '../../testing/test-app.js'

export const technician = async (at: TestApp, name?: string): Promise<Agent> =>
  at.as(await aUser(at.database.db, name === undefined ? {} : { name }))

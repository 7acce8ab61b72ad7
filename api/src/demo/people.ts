import type { Actor } from '@weirlight/shared/permissions'
import type { DemoWorld } from './demo-world.js'

export function pickTechnician(world: DemoWorld, turn: number): Actor {
  const technicians = world.ofRole('technician')
  const found = technicians[turn % technicians.length]
  if (!found) throw new Error('The demonstration needs technicians.')
  return found
}

export function pickManager(world: DemoWorld, turn: number): Actor {
  const managers = world.ofRole('qa-manager')
  const found = managers[turn % managers.length]
  if (!found) throw new Error('The demonstration needs QA managers.')
  return found
}

export function clientPerson(world: DemoWorld, clientId: string): string {
  return world.ofRole('client').find((one) => one.clientId === clientId)?.name ?? 'Duty operator'
}

export const ROLES = ['technician', 'qa-manager', 'client', 'auditor', 'administrator'] as const
export type Role = (typeof ROLES)[number]

export const ROLE_NAMES: Record<Role, string> = {
  technician: 'Technician',
  'qa-manager': 'QA manager',
  client: 'Client utility',
  auditor: 'Auditor',
  administrator: 'Administrator',
}

const house = ['technician', 'qa-manager', 'auditor', 'administrator'] as const
const bench = ['technician', 'qa-manager'] as const
const record = ['technician', 'qa-manager', 'auditor'] as const
const recordAndClient = ['technician', 'qa-manager', 'auditor', 'client'] as const

/** Who may do what. A client's actions reach only rows of its own utility. */
export const PERMISSIONS = {
  'today.read': ['technician', 'qa-manager', 'auditor', 'administrator', 'client'],
  'search.go': house,
  'users.read': ['qa-manager', 'auditor', 'administrator'],
  'users.manage': ['administrator'],
  'laboratory.read': house,
  'laboratory.manage': ['administrator'],
  'clients.read': house,
  'clients.manage': ['qa-manager', 'administrator'],
  'programmes.read': house,
  'methods.read': house,
  'materials.read': record,
  'materials.manage': bench,
  'instruments.read': record,
  'instruments.manage': bench,
  'samples.read': record,
  'samples.receive': bench,
  'calibrations.read': record,
  'calibrations.prepare': bench,
  'calibrations.sign': ['qa-manager'],
  'batches.read': record,
  'batches.run': bench,
  'batches.review': ['qa-manager'],
  'results.read': record,
  'results.export': record,
  'story.read': record,
  'charts.read': record,
  'alerts.read': recordAndClient,
  'alerts.acknowledge': ['client'],
  'alerts.manage': ['qa-manager'],
  'certificates.read': recordAndClient,
  'certificates.manage': ['qa-manager'],
  'portal.read': ['client'],
  'history.read': ['qa-manager', 'auditor', 'administrator'],
  'mail.read': ['qa-manager', 'auditor', 'administrator'],
  'mail.retry': ['qa-manager', 'administrator'],
  'validation.read': ['qa-manager', 'auditor'],
  'validation.run': ['qa-manager'],
} as const satisfies Record<string, readonly Role[]>

export type Action = keyof typeof PERMISSIONS

/** The person acting, as the session knows them. `clientId` is set for the client role alone. */
export interface Actor {
  userId: string
  name: string
  role: Role
  clientId: string | null
}

/** What is acted on, as far as permission depends on it. */
export interface Subject {
  clientId?: string | null
  /** who prepared the thing: that person may not sign it */
  preparedBy?: string | null
}

const SIGNING: readonly Action[] = ['calibrations.sign', 'batches.review']

/** Pure: the server refuses with it, the page hides with it. */
export function can(
  actor: Pick<Actor, 'userId' | 'role' | 'clientId'>,
  action: Action,
  subject?: Subject,
): boolean {
  const roles: readonly Role[] = PERMISSIONS[action]
  if (!roles.includes(actor.role)) return false
  if (actor.role === 'client' && subject && subject.clientId !== undefined) {
    return actor.clientId !== null && subject.clientId === actor.clientId
  }
  if (SIGNING.includes(action) && subject?.preparedBy) return subject.preparedBy !== actor.userId
  return true
}

import type { RouteObject } from 'react-router-dom'

export const settingsRoutes: RouteObject[] = [
  {
    path: 'settings',
    handle: { needs: 'laboratory.read' },
    lazy: async () => ({ Component: (await import('./settings-page')).SettingsPage }),
  },
  {
    path: 'settings/people',
    handle: { needs: 'users.read' },
    lazy: async () => ({ Component: (await import('./people-page')).PeoplePage }),
  },
  {
    path: 'settings/people/:id',
    handle: { needs: 'users.read' },
    lazy: async () => ({ Component: (await import('./person-page')).PersonPage }),
  },
  {
    path: 'settings/laboratory',
    handle: { needs: 'laboratory.read' },
    lazy: async () => ({ Component: (await import('./laboratory-page')).LaboratoryPage }),
  },
  {
    path: 'settings/mail',
    handle: { needs: 'mail.read' },
    lazy: async () => ({ Component: (await import('./mail-page')).MailPage }),
  },
  {
    path: 'settings/health',
    handle: { needs: 'laboratory.read' },
    lazy: async () => ({ Component: (await import('./health-page')).HealthPage }),
  },
  {
    path: 'settings/validation',
    handle: { needs: 'validation.read' },
    lazy: async () => ({ Component: (await import('./validation-page')).ValidationPage }),
  },
]

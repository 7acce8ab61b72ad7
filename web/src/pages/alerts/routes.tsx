import type { RouteObject } from 'react-router-dom'

export const alertsRoutes: RouteObject[] = [
  {
    path: 'alerts',
    handle: { needs: 'alerts.read' },
    lazy: async () => ({ Component: (await import('./alerts-page')).AlertsPage }),
  },
  {
    path: 'alerts/:id',
    handle: { needs: 'alerts.read' },
    lazy: async () => ({ Component: (await import('./alert-page')).AlertPage }),
  },
]

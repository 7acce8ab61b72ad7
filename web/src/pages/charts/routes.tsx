import type { RouteObject } from 'react-router-dom'

export const chartsRoutes: RouteObject[] = [
  {
    path: 'charts',
    handle: { needs: 'charts.read' },
    lazy: async () => ({ Component: (await import('./charts-page')).ChartsPage }),
  },
]

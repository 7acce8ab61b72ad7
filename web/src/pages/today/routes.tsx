import type { RouteObject } from 'react-router-dom'

export const todayRoutes: RouteObject[] = [
  {
    path: 'today',
    handle: { needs: 'today.read' },
    lazy: async () => ({ Component: (await import('./today-page')).TodayPage }),
  },
]

import type { RouteObject } from 'react-router-dom'

export const historyRoutes: RouteObject[] = [
  {
    path: 'history',
    handle: { needs: 'history.read' },
    lazy: async () => ({ Component: (await import('./history-page')).HistoryPage }),
  },
  {
    path: 'history/seals',
    handle: { needs: 'history.read' },
    lazy: async () => ({ Component: (await import('./seals-page')).SealsPage }),
  },
]

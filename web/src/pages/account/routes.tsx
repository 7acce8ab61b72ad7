import type { RouteObject } from 'react-router-dom'

export const accountRoutes: RouteObject[] = [
  {
    path: 'account',
    lazy: async () => ({ Component: (await import('./account-page')).AccountPage }),
  },
]

import type { RouteObject } from 'react-router-dom'

const page = async () => ({ Component: (await import('./check-page')).CheckPage })

export const checkRoutes: RouteObject[] = [
  { path: 'check', lazy: page },
  { path: 'check/:code', lazy: page },
]

import type { RouteObject } from 'react-router-dom'

const handle = { needs: 'portal.read' }

export const portalRoutes: RouteObject[] = [
  { path: 'our', handle, lazy: async () => ({ Component: (await import('./now-page')).NowPage }) },
  {
    path: 'our/results',
    handle,
    lazy: async () => ({ Component: (await import('./our-results-page')).OurResultsPage }),
  },
  {
    path: 'our/certificates',
    handle,
    lazy: async () => ({ Component: (await import('./our-certificates-page')).OurCertificatesPage }),
  },
  {
    path: 'our/certificates/:id',
    handle,
    lazy: async () => ({ Component: (await import('./our-certificates-page')).OurCertificatePage }),
  },
  {
    path: 'our/points',
    handle,
    lazy: async () => ({ Component: (await import('./our-points-page')).OurPointsPage }),
  },
  {
    path: 'our/points/:id',
    handle,
    lazy: async () => ({ Component: (await import('./our-points-page')).OurPointPage }),
  },
  {
    path: 'our/alerts',
    handle,
    lazy: async () => ({ Component: (await import('./our-alerts-page')).OurAlertsPage }),
  },
  {
    path: 'our/alerts/:id',
    handle,
    lazy: async () => ({ Component: (await import('./our-alerts-page')).OurAlertPage }),
  },
]

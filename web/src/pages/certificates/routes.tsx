import type { RouteObject } from 'react-router-dom'

export const certificatesRoutes: RouteObject[] = [
  {
    path: 'certificates',
    handle: { needs: 'certificates.read' },
    lazy: async () => ({ Component: (await import('./certificates-page')).CertificatesPage }),
  },
  {
    path: 'certificates/:id',
    handle: { needs: 'certificates.read' },
    lazy: async () => ({ Component: (await import('./certificate-page')).CertificatePage }),
  },
]

import type { RouteObject } from 'react-router-dom'

export const receivingRoutes: RouteObject[] = [
  {
    path: 'receiving',
    handle: { needs: 'samples.read' },
    lazy: async () => ({ Component: (await import('./register-page')).RegisterPage }),
  },
  {
    path: 'receiving/new',
    handle: { needs: 'samples.receive' },
    lazy: async () => ({ Component: (await import('./receive-page')).ReceivePage }),
  },
  {
    path: 'receiving/manifest',
    handle: { needs: 'samples.receive' },
    lazy: async () => ({ Component: (await import('./manifest-page')).ManifestPage }),
  },
  {
    path: 'receiving/waiting',
    handle: { needs: 'samples.read' },
    lazy: async () => ({ Component: (await import('./waiting-page')).WaitingPage }),
  },
  {
    path: 'receiving/labels',
    handle: { needs: 'samples.read' },
    lazy: async () => ({ Component: (await import('./labels-page')).LabelsPage }),
  },
  {
    path: 'receiving/samples/:id',
    handle: { needs: 'samples.read' },
    lazy: async () => ({ Component: (await import('./sample-page')).SamplePage }),
  },
]

import type { RouteObject } from 'react-router-dom'

export const benchRoutes: RouteObject[] = [
  {
    path: 'bench',
    handle: { needs: 'methods.read' },
    lazy: async () => ({ Component: (await import('./readiness-page')).ReadinessPage }),
  },
  {
    path: 'bench/methods',
    handle: { needs: 'methods.read' },
    lazy: async () => ({ Component: (await import('./methods-page')).MethodsPage }),
  },
  {
    path: 'bench/methods/:id',
    handle: { needs: 'methods.read' },
    lazy: async () => ({ Component: (await import('./method-page')).MethodPage }),
  },
  {
    path: 'bench/programmes',
    handle: { needs: 'programmes.read' },
    lazy: async () => ({ Component: (await import('./programmes-page')).ProgrammesPage }),
  },
  {
    path: 'bench/materials',
    handle: { needs: 'materials.read' },
    lazy: async () => ({ Component: (await import('./materials-page')).MaterialsPage }),
  },
  {
    path: 'bench/materials/new',
    handle: { needs: 'materials.manage' },
    lazy: async () => ({ Component: (await import('./new-material-page')).NewMaterialPage }),
  },
  {
    path: 'bench/materials/:id',
    handle: { needs: 'materials.read' },
    lazy: async () => ({ Component: (await import('./material-page')).MaterialPage }),
  },
  {
    path: 'bench/instruments',
    handle: { needs: 'instruments.read' },
    lazy: async () => ({ Component: (await import('./instruments-page')).InstrumentsPage }),
  },
  {
    path: 'bench/instruments/new',
    handle: { needs: 'instruments.manage' },
    lazy: async () => ({ Component: (await import('./new-instrument-page')).NewInstrumentPage }),
  },
  {
    path: 'bench/instruments/:id',
    handle: { needs: 'instruments.read' },
    lazy: async () => ({ Component: (await import('./instrument-page')).InstrumentPage }),
  },
  {
    path: 'bench/people',
    handle: { needs: 'users.read' },
    lazy: async () => ({ Component: (await import('./bench-people-page')).BenchPeoplePage }),
  },
  {
    path: 'bench/clients',
    handle: { needs: 'clients.read' },
    lazy: async () => ({ Component: (await import('./clients-page')).ClientsPage }),
  },
  {
    path: 'bench/clients/new',
    handle: { needs: 'clients.manage' },
    lazy: async () => ({ Component: (await import('./new-client-page')).NewClientPage }),
  },
  {
    path: 'bench/clients/:id',
    handle: { needs: 'clients.read' },
    lazy: async () => ({ Component: (await import('./client-page')).ClientPage }),
  },
]

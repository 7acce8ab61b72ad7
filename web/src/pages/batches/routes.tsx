import type { RouteObject } from 'react-router-dom'

export const batchesRoutes: RouteObject[] = [
  {
    path: 'batches',
    handle: { needs: 'batches.read' },
    lazy: async () => ({ Component: (await import('./batches-page')).BatchesPage }),
  },
  {
    path: 'batches/new',
    handle: { needs: 'batches.run' },
    lazy: async () => ({ Component: (await import('./new-batch-page')).NewBatchPage }),
  },
  {
    path: 'batches/:id',
    handle: { needs: 'batches.read' },
    lazy: async () => ({ Component: (await import('./batch-page')).BatchPage }),
  },
  {
    path: 'batches/:id/upload',
    handle: { needs: 'batches.run' },
    lazy: async () => ({ Component: (await import('./load-readings-page')).LoadReadingsPage }),
  },
]

import type { RouteObject } from 'react-router-dom'

export const reviewRoutes: RouteObject[] = [
  {
    path: 'review',
    handle: { needs: 'batches.read' },
    lazy: async () => ({ Component: (await import('./review-page')).ReviewPage }),
  },
  {
    path: 'review/batches/:id',
    handle: { needs: 'batches.read' },
    lazy: async () => ({ Component: (await import('./review-batch-page')).ReviewBatchPage }),
  },
]

import type { RouteObject } from 'react-router-dom'

export const resultsRoutes: RouteObject[] = [
  {
    path: 'results',
    handle: { needs: 'results.read' },
    lazy: async () => ({ Component: (await import('./results-page')).ResultsPage }),
  },
  {
    path: 'results/:id',
    handle: { needs: 'story.read' },
    lazy: async () => ({ Component: (await import('./result-page')).ResultPage }),
  },
]

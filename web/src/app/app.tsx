import { QueryClientProvider } from '@tanstack/react-query'
import { useState } from 'react'
import { RouterProvider } from 'react-router-dom'
import { makeQueryClient } from '../lib/query-client'
import { sessionQuery } from '../lib/session'
import { makeRouter } from './router'
import { useBenchTheme } from './use-bench-theme'

export function App() {
  useBenchTheme()
  const [client] = useState(() => {
    const made = makeQueryClient()
    // who is here is asked while the page's own code is still on its way
    void made.prefetchQuery(sessionQuery)
    return made
  })
  const [router] = useState(makeRouter)
  return (
    <QueryClientProvider client={client}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  )
}

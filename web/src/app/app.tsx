import { QueryClientProvider } from '@tanstack/react-query'
import { useState } from 'react'
import { RouterProvider } from 'react-router-dom'
import { makeQueryClient } from '../lib/query-client'
import { makeRouter } from './router'
import { useBenchTheme } from './use-bench-theme'

export function App() {
  useBenchTheme()
  const [client] = useState(makeQueryClient)
  const [router] = useState(makeRouter)
  return (
    <QueryClientProvider client={client}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  )
}

import { useQueryClient } from '@tanstack/react-query'
import { useState } from 'react'
import type { ProblemError } from '../lib/problem-error'
import { Strip } from './sheet'

/** Reads again what is on the page; what was typed stays. */
export function LoadAgain({ onLoaded }: { onLoaded?: () => void }) {
  const client = useQueryClient()
  const [isBusy, setBusy] = useState(false)
  const load = async () => {
    setBusy(true)
    try {
      await client.invalidateQueries({ refetchType: 'active' })
    } finally {
      setBusy(false)
    }
    onLoaded?.()
  }
  return (
    <button type="button" className="button" disabled={isBusy} onClick={() => void load()}>
      {isBusy ? 'Loading…' : 'Load it again'}
    </button>
  )
}

interface RefusedProps {
  /** of a call outside a form; null: nothing was refused */
  problem: ProblemError | null
  /** takes the refusal away once the page shows what stands now */
  reset: () => void
}

/** Why a button did nothing, with the way out when somebody else was first. */
export function Refused({ problem, reset }: RefusedProps) {
  if (!problem) return null
  return (
    <Strip tone="above" isAlert action={problem.code === 'stale' && <LoadAgain onLoaded={reset} />}>
      {problem.errors[0]?.message ?? problem.message}
    </Strip>
  )
}

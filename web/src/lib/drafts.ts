import { useCallback, useEffect, useRef, useState } from 'react'
import { useSession } from './session'

const PREFIX = 'weirlight:draft'

interface Stored<T> {
  savedAt: number
  value: T
}

function keyFor(userId: string, name: string): string {
  return `${PREFIX}:${userId}:${name}`
}

/** Storage may be full or forbidden; a draft is a help, never a condition. */
function write(key: string, text: string): boolean {
  try {
    localStorage.setItem(key, text)
    return true
  } catch {
    return false
  }
}

function read<T>(key: string): Stored<T> | null {
  try {
    const text = localStorage.getItem(key)
    return text === null ? null : (JSON.parse(text) as Stored<T>)
  } catch {
    return null
  }
}

/** A person's drafts stay on the bench computer they share with others: each sees only their own. */
export function useDraft<T>(name: string) {
  const { userId } = useSession()
  const key = keyFor(userId, name)
  const [found] = useState(() => read<T>(key))
  const timer = useRef<ReturnType<typeof setTimeout> | undefined>(undefined)
  const pending = useRef<T | undefined>(undefined)

  const flush = useCallback(() => {
    clearTimeout(timer.current)
    if (pending.current === undefined) return
    write(
      key,
      JSON.stringify({ savedAt: performance.timeOrigin + performance.now(), value: pending.current }),
    )
    pending.current = undefined
  }, [key])

  const save = useCallback(
    (value: T) => {
      pending.current = value
      clearTimeout(timer.current)
      timer.current = setTimeout(flush, 250)
    },
    [flush],
  )
  const clear = useCallback(() => {
    clearTimeout(timer.current)
    pending.current = undefined
    try {
      localStorage.removeItem(key)
    } catch {
      // nothing was kept
    }
  }, [key])

  useEffect(() => {
    window.addEventListener('pagehide', flush)
    return () => {
      window.removeEventListener('pagehide', flush)
      flush()
    }
  }, [flush])

  return { found: found?.value ?? null, save, clear }
}

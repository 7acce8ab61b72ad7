import { useCallback, useEffect, useMemo, useRef } from 'react'
import { useSearchParams } from 'react-router-dom'

/**
 * Filters live in the address, so that a list can be linked, kept and come back to.
 * `defaults` names every filter; a value equal to its default is left out of the address.
 */
export function useFilters<T extends Record<string, string>>(
  defaults: T,
): [filters: T, change: (part: Partial<T>) => void, clear: () => void] {
  const [search, setSearch] = useSearchParams()
  // two filters may change before the address has followed the first
  const latest = useRef(search)
  useEffect(() => {
    latest.current = search
  }, [search])
  const go = useCallback(
    (next: URLSearchParams) => {
      latest.current = next
      setSearch(next, { replace: true })
    },
    [setSearch],
  )
  // the caller may write the defaults in place
  const shape = JSON.stringify(defaults)
  const filters = useMemo(() => {
    const known = JSON.parse(shape) as T
    const entries = Object.entries(known).map(([name, value]) => [name, search.get(name) ?? value])
    return Object.fromEntries(entries) as T
  }, [search, shape])

  const change = useCallback(
    (part: Partial<T>) => {
      const known = JSON.parse(shape) as T
      const next = new URLSearchParams(latest.current)
      for (const [name, value] of Object.entries(part)) {
        if (value === undefined || value === '' || value === known[name]) next.delete(name)
        else next.set(name, String(value))
      }
      go(next)
    },
    [go, shape],
  )
  const clear = useCallback(() => {
    const names = Object.keys(JSON.parse(shape) as T)
    go(new URLSearchParams([...latest.current].filter(([name]) => !names.includes(name))))
  }, [go, shape])
  return [filters, change, clear]
}

import { goTo, type ResponseOf } from '@weirlight/shared/contracts'
import { useEffect, useRef, useState, type FormEvent } from 'react'
import { Link, useNavigate } from 'react-router-dom'
import { call } from '../../lib/call'
import { asProblem } from '../../lib/problem-error'
import { Kbd } from '../../ui/sheet'
import { usePanel } from './use-panel'

type Hit = ResponseOf<typeof goTo>['hits'][number]

/** Ctrl K: a number typed anywhere leads to its page. */
export function GoBox() {
  const navigate = useNavigate()
  const input = useRef<HTMLInputElement>(null)
  const { frame, isOpen, setOpen } = usePanel()
  const [hits, setHits] = useState<readonly Hit[]>([])
  const [sentence, setSentence] = useState<string | null>(null)

  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.key.toLowerCase() !== 'k') return
      event.preventDefault()
      input.current?.focus()
      input.current?.select()
    }
    document.addEventListener('keydown', onKey)
    return () => document.removeEventListener('keydown', onKey)
  }, [])

  const go = async (event: FormEvent) => {
    event.preventDefault()
    const number = input.current?.value.trim() ?? ''
    if (number === '') return
    setHits([])
    try {
      const found = (await call(goTo, { query: { number } })).hits
      const [only] = found
      if (found.length === 1 && only) {
        setOpen(false)
        input.current?.blur()
        if (input.current) input.current.value = ''
        await navigate(only.to)
        return
      }
      setHits(found)
      setSentence(found.length === 0 ? `Nothing here has the number “${number}”.` : null)
    } catch (error) {
      setSentence(asProblem(error).message)
    }
    setOpen(true)
  }

  return (
    <div className="go" ref={frame}>
      <form className="go-box" role="search" onSubmit={(event) => void go(event)}>
        <input
          ref={input}
          aria-label="Go to a sample, batch, calibration, certificate or alert number"
          placeholder="Find"
          autoComplete="off"
          spellCheck={false}
          maxLength={30}
        />
        <Kbd>Ctrl K</Kbd>
      </form>
      {isOpen && (sentence !== null || hits.length > 0) && (
        <div className="panel" role="status">
          {sentence !== null && <p>{sentence}</p>}
          {hits.map((hit) => (
            <Link key={`${hit.kind}${hit.id}`} to={hit.to} onClick={() => setOpen(false)}>
              <span className="strong">{hit.number}</span> <span className="quiet">{hit.kind}</span>
              <br />
              <span className="note">{hit.detail}</span>
            </Link>
          ))}
        </div>
      )}
    </div>
  )
}

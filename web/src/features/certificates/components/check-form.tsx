import { useState, type FormEvent } from 'react'
import { useNavigate } from 'react-router-dom'
import { paths } from '../../../lib'
import { DoorField } from '../../../ui/door'
import { codeProblem, writtenCode } from '../code-words'

/** Types the code of a certificate; no session is needed. */
export function CheckForm({ code }: { code: string }) {
  const navigate = useNavigate()
  const [typed, setTyped] = useState(code)
  const [problem, setProblem] = useState<string | null>(null)
  const submit = (event: FormEvent) => {
    event.preventDefault()
    const found = codeProblem(typed)
    setProblem(found)
    if (found) return
    const written = writtenCode(typed)
    setTyped(written)
    void navigate(paths.checkCode(written))
  }
  return (
    <form className="door-form" onSubmit={submit} noValidate>
      <DoorField
        label="Code at the foot of the certificate"
        name="code"
        value={typed}
        onChange={(event) => {
          setTyped(event.target.value)
          setProblem(null)
        }}
        placeholder="7QHK-2M9D-XP4T-…"
        autoComplete="off"
        autoCapitalize="characters"
        spellCheck={false}
        maxLength={40}
        error={problem ?? undefined}
        hint="Sixteen letters and digits. Hyphens and capitals do not matter."
      />
      <button type="submit" className="button main">
        Check
      </button>
    </form>
  )
}

import { useState, type DragEvent } from 'react'
import { StatusTag, type Mark } from '../../../ui'
import { sha256Of } from '../code-words'

type Found = 'none' | 'same' | 'different' | 'cannot'

const MARKS = {
  same: { word: 'The same file', shape: 'disc', tone: 'meets' },
  different: { word: 'Not the same file', shape: 'triangle', tone: 'above' },
} as const satisfies Record<string, Mark>

/** Compares a PDF with the one issued. The file never leaves this computer. */
export function CheckFile({ sha256, number }: { sha256: string | null; number: string }) {
  const [found, setFound] = useState<{ what: Found; name: string }>({ what: 'none', name: '' })
  const [isOver, setOver] = useState(false)
  if (sha256 === null) {
    return <p className="note">Its document is still being made; the file can be compared in a minute.</p>
  }
  const compare = async (file: File | undefined) => {
    if (!file) return
    const hash = await sha256Of(file)
    const what = hash === null ? 'cannot' : hash === sha256 ? 'same' : 'different'
    setFound({ what, name: file.name })
  }
  const drop = (event: DragEvent) => {
    event.preventDefault()
    setOver(false)
    void compare(event.dataTransfer.files[0])
  }
  return (
    <div
      className={isOver ? 'drop check-drop is-over' : 'drop check-drop'}
      onDragOver={(event) => {
        event.preventDefault()
        setOver(true)
      }}
      onDragLeave={() => setOver(false)}
      onDrop={drop}
    >
      <label>
        Drop the PDF here to compare it, or choose it:
        <br />
        <input
          type="file"
          accept="application/pdf,.pdf"
          onChange={(event) => void compare(event.target.files?.[0])}
        />
      </label>
      <p className="note">The file stays on this computer.</p>
      <div role="status">
        {(found.what === 'same' || found.what === 'different') && (
          <>
            <StatusTag mark={MARKS[found.what]} />
            <p>
              {found.what === 'same'
                ? `${found.name} is the document of ${number}, byte for byte.`
                : `${found.name} is not the document of ${number} as issued: something in it differs, or it is another file.`}
            </p>
          </>
        )}
        {found.what === 'cannot' && (
          <p className="caution">
            This browser compares files only on a secure connection (https). Compare the SHA-256 below by
            other means.
          </p>
        )}
      </div>
    </div>
  )
}

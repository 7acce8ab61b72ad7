import { useEffect, useRef, useState } from 'react'

/** A small panel under a control: closed by Escape, by a click elsewhere, and when the focus leaves it. */
export function usePanel() {
  const [isOpen, setOpen] = useState(false)
  const frame = useRef<HTMLDivElement>(null)
  useEffect(() => {
    if (!isOpen) return
    const elsewhere = (event: Event) => {
      if (event.target instanceof Node && frame.current?.contains(event.target)) return
      setOpen(false)
    }
    const escape = (event: KeyboardEvent) => {
      if (event.key === 'Escape') setOpen(false)
    }
    document.addEventListener('pointerdown', elsewhere)
    document.addEventListener('focusin', elsewhere)
    document.addEventListener('keydown', escape)
    return () => {
      document.removeEventListener('pointerdown', elsewhere)
      document.removeEventListener('focusin', elsewhere)
      document.removeEventListener('keydown', escape)
    }
  }, [isOpen])
  return { frame, isOpen, setOpen }
}

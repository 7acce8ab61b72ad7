import { useEffect, useState } from 'react'

/** Code 128 of a number, drawn once the writer is loaded; the number stands beside it as text in any case. */
export function Barcode({ text }: { text: string }) {
  const [picture, setPicture] = useState<string | null>(null)
  useEffect(() => {
    let isCurrent = true
    void import('bwip-js/browser').then(({ code128, drawingSVG }) => {
      const drawn = code128({ bcid: 'code128', text, height: 9, paddingwidth: 10 }, drawingSVG())
      if (isCurrent) setPicture(drawn.replace('<svg ', '<svg preserveAspectRatio="none" '))
    })
    return () => {
      isCurrent = false
    }
  }, [text])
  if (picture === null) return <div className="label-code" />
  // drawn here from a number of our own; it holds nothing that anybody typed
  return (
    <div
      className="label-code"
      role="img"
      aria-label={`Bar code of ${text}`}
      dangerouslySetInnerHTML={{ __html: picture }}
    />
  )
}

import { useEffect, useState } from 'react'

/** What a device reads with its camera, drawn on this page: the secret goes to no other place for it. */
export function DevicePicture({ uri }: { uri: string }) {
  const [picture, setPicture] = useState<string | null>(null)
  useEffect(() => {
    let isCurrent = true
    void import('bwip-js/browser').then(({ qrcode, drawingSVG }) => {
      const drawn = qrcode(
        { bcid: 'qrcode', text: uri, scale: 4, padding: 4, backgroundcolor: 'FFFFFF' },
        drawingSVG(),
      )
      if (isCurrent) setPicture(drawn)
    })
    return () => {
      isCurrent = false
    }
  }, [uri])
  if (picture === null) return <div className="device-picture" />
  // drawn here; every character of the text is one of the code's modules and none of the picture's source
  return (
    <div
      className="device-picture"
      role="img"
      aria-label="Picture for your device; the secret stands below as text"
      dangerouslySetInnerHTML={{ __html: picture }}
    />
  )
}

import { Button } from 'antd'
import { Box, Strip } from '../../../ui'

interface RecoveryCodesProps {
  codes: readonly string[]
  onKept: () => void
}

/** Told once: only their hashes are kept. */
export function RecoveryCodes({ codes, onKept }: RecoveryCodesProps) {
  return (
    <Box title="Your recovery codes">
      <div className="stack">
        <Strip title="Shown this once">
          When your device is not at hand, each of these signs you in once instead of its code. Keep them
          where you keep papers that matter, not on the device.
        </Strip>
        <ul className="recovery-codes" aria-label="Recovery codes">
          {codes.map((code) => (
            <li key={code}>{code}</li>
          ))}
        </ul>
        <div className="row no-print">
          <Button onClick={() => window.print()}>Print</Button>
          <Button type="primary" onClick={onKept}>
            I have kept them
          </Button>
        </div>
      </div>
    </Box>
  )
}

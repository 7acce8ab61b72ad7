/** A state is always a word and a shape, never a colour alone. */
export interface StateMark {
  word: string
  shape: 'ring' | 'disc' | 'diamond' | 'triangle'
  tone: 'weir' | 'meets' | 'caution' | 'above' | 'quiet'
}

const mark = (word: string, shape: StateMark['shape'], tone: StateMark['tone']): StateMark => ({
  word,
  shape,
  tone,
})

export const STATE_MARKS = {
  sample: {
    expected: mark('Expected', 'ring', 'quiet'),
    received: mark('Received, to be accepted', 'ring', 'caution'),
    accepted: mark('Accepted', 'disc', 'weir'),
    'accepted-with-qualification': mark('Accepted with a qualification', 'diamond', 'caution'),
    rejected: mark('Rejected', 'triangle', 'above'),
    'in-analysis': mark('In analysis', 'ring', 'weir'),
    reported: mark('Reported', 'disc', 'meets'),
    disposed: mark('Disposed of', 'disc', 'quiet'),
  },
  determination: {
    requested: mark('Waiting', 'ring', 'quiet'),
    'in-batch': mark('In a batch', 'ring', 'weir'),
    measured: mark('Measured', 'diamond', 'weir'),
    reviewed: mark('Reviewed', 'diamond', 'meets'),
    released: mark('Released', 'disc', 'meets'),
    withdrawn: mark('Withdrawn', 'triangle', 'quiet'),
  },
  calibration: {
    draft: mark('Draft', 'ring', 'quiet'),
    submitted: mark('Submitted, waiting for signature', 'ring', 'caution'),
    'in-force': mark('In force', 'disc', 'meets'),
    expired: mark('Expired', 'diamond', 'quiet'),
    invalidated: mark('Invalidated', 'triangle', 'above'),
    replaced: mark('Replaced', 'diamond', 'quiet'),
    rejected: mark('Sent back', 'triangle', 'caution'),
  },
  batch: {
    open: mark('Open, reading', 'ring', 'weir'),
    submitted: mark('Submitted for review', 'ring', 'caution'),
    reviewed: mark('Reviewed', 'diamond', 'meets'),
    released: mark('Released', 'disc', 'meets'),
    returned: mark('Sent back', 'triangle', 'caution'),
  },
  result: {
    measured: mark('Measured', 'ring', 'weir'),
    reviewed: mark('Reviewed', 'diamond', 'meets'),
    released: mark('Released', 'disc', 'meets'),
    'not-reported': mark('Kept, not reported', 'diamond', 'quiet'),
  },
  alert: {
    raised: mark('Raised', 'triangle', 'above'),
    notified: mark('Mailed, unanswered', 'triangle', 'above'),
    acknowledged: mark('Acknowledged', 'diamond', 'caution'),
    closed: mark('Closed', 'disc', 'meets'),
    cancelled: mark('Cancelled', 'ring', 'quiet'),
  },
  certificate: {
    issued: mark('Issued', 'disc', 'meets'),
    superseded: mark('Superseded by an amendment', 'diamond', 'caution'),
    withdrawn: mark('Withdrawn', 'triangle', 'above'),
  },
  mail: {
    waiting: mark('Waiting to leave', 'ring', 'quiet'),
    sending: mark('Leaving now', 'ring', 'weir'),
    sent: mark('Sent', 'disc', 'meets'),
    failed: mark('Not delivered', 'triangle', 'above'),
  },
  user: {
    invited: mark('Invited', 'ring', 'caution'),
    active: mark('Active', 'disc', 'meets'),
    disabled: mark('Disabled', 'triangle', 'quiet'),
  },
  verdict: {
    below: mark('below', 'disc', 'meets'),
    above: mark('above', 'triangle', 'above'),
    'conditional-below': mark('below, within uncertainty', 'diamond', 'caution'),
    'conditional-above': mark('above, within uncertainty', 'diamond', 'caution'),
  },
} as const satisfies Record<string, Record<string, StateMark>>

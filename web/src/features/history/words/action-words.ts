import { sentenceOf } from './thing-words'

/** What was done, as the actions are called in the record. */
const ACTIONS: Record<string, string> = {
  'sample.receive': 'Received a sample',
  'sample.accept': 'Accepted a sample',
  'sample.qualify': 'Accepted a sample with a qualification',
  'sample.reject': 'Rejected a sample',
  'sample.correct': 'Corrected a sample',
  'manifest.preview': 'Read a manifest',
  'manifest.receive': 'Received a manifest',
  'determination.request': 'Asked for a determination',
  'determination.withdraw': 'Withdrew a determination',
  'calibration.start': 'Started a calibration',
  'calibration.copy': 'Copied a calibration',
  'calibration.save': 'Changed a calibration',
  'calibration.submit': 'Submitted a calibration',
  'calibration.sign': 'Signed a calibration',
  'calibration.reject': 'Sent a calibration back',
  'calibration.invalidate': 'Took a calibration out of force',
  'calibration.expire': 'A calibration expired',
  'batch.open': 'Opened a batch',
  'batch.change': 'Changed a batch',
  'batch.read': 'Entered readings',
  'batch.submit': 'Submitted a batch',
  'batch.return': 'Sent a batch back',
  'batch.review': 'Reviewed a batch',
  'batch.release': 'Released a batch',
  'alert.raise': 'Raised an alert',
  'alert.notify': 'Mailed an alert',
  'alert.acknowledge': 'Acknowledged an alert',
  'alert.close': 'Closed an alert',
  'alert.cancel': 'Cancelled an alert',
  'certificate.issue': 'Issued a certificate',
  'certificate.amend': 'Amended a certificate',
  'certificate.withdraw': 'Withdrew a certificate',
  'certificate.render': 'Drew a certificate',
  'certificate.open': 'Opened a certificate',
  'certificate.send-again': 'Sent a certificate again',
  'material.add': 'Recorded a lot',
  'material.finish': 'Used up a lot',
  'material.withdraw': 'Took a lot out of use',
  'instrument.add': 'Added an instrument',
  'instrument.check': 'Checked an instrument',
  'instrument.take-out': 'Took an instrument out of use',
  'instrument.return': 'Returned an instrument to use',
  'client.add': 'Added a client',
  'client.change': 'Changed a client',
  'client.add-contact': 'Added a contact',
  'client.change-contact': 'Changed a contact',
  'client.remove-contact': 'Removed a contact',
  'client.add-point': 'Added a sampling point',
  'client.change-point': 'Changed a sampling point',
  'point.change': 'Changed a sampling point',
  'user.invite': 'Invited a person',
  'user.invite-again': 'Invited a person again',
  'user.invite-administrator': 'Invited the first administrator',
  'user.accept-invitation': 'Accepted an invitation',
  'user.ask-reset': 'Asked for a new passphrase',
  'user.start-reset': 'Started a new passphrase',
  'user.set-passphrase': 'Chose a passphrase',
  'user.set-up-second-factor': 'Set up a second factor',
  'user.remove-second-factor': 'Took off the second factor of their own',
  'user.take-off-second-factor': 'Took off a person’s second factor',
  'user.change': 'Changed an account',
  'user.disable': 'Disabled an account',
  'user.enable': 'Enabled an account',
  'user.authorise': 'Authorised a person',
  'session.sign-in': 'Signed in',
  'laboratory.change': 'Changed the laboratory’s particulars',
  'programme.load': 'Loaded programmes and limits',
  'reference.load': 'Loaded the catalogue',
}

/** In words, also where an action is not in the list: `batch.read-again` becomes “Batch: read again”. */
export function actionWord(action: string): string {
  const known = ACTIONS[action]
  if (known) return known
  const [thing = action, ...rest] = action.split('.')
  const done = rest.join(' ').replaceAll('-', ' ')
  return done === '' ? sentenceOf(thing) : `${sentenceOf(thing)}: ${done}`
}

const OPERATIONS = { insert: 'new', update: 'changed', delete: 'removed' } as const
export const operationWord = (operation: keyof typeof OPERATIONS) => OPERATIONS[operation]

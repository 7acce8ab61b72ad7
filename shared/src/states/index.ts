import { defineStates } from './machine.js'

export { MoveRefused, refuseOwnWork } from './machine.js'

export const sampleStates = defineStates({
  thing: 'sample',
  words: {
    expected: 'expected',
    received: 'received',
    accepted: 'accepted',
    'accepted-with-qualification': 'accepted with a qualification',
    rejected: 'rejected',
    'in-analysis': 'in analysis',
    reported: 'reported',
    disposed: 'disposed',
  },
  moves: {
    receive: { from: ['expected'], to: 'received', done: 'received' },
    accept: { from: ['received'], to: 'accepted', done: 'accepted' },
    qualify: { from: ['received'], to: 'accepted-with-qualification', done: 'accepted with a qualification' },
    reject: { from: ['received'], to: 'rejected', done: 'rejected' },
    analyse: {
      from: ['accepted', 'accepted-with-qualification', 'in-analysis', 'reported'],
      to: 'in-analysis',
      done: 'put into a batch',
    },
    report: { from: ['in-analysis', 'reported'], to: 'reported', done: 'reported' },
    dispose: { from: ['reported', 'rejected'], to: 'disposed', done: 'disposed of' },
  },
})
export type SampleState = keyof typeof sampleStates.words

export const determinationStates = defineStates({
  thing: 'determination',
  words: {
    requested: 'requested',
    'in-batch': 'in a batch',
    measured: 'measured',
    reviewed: 'reviewed',
    released: 'released',
    withdrawn: 'withdrawn',
  },
  moves: {
    putInBatch: { from: ['requested'], to: 'in-batch', done: 'put into a batch' },
    measure: { from: ['in-batch'], to: 'measured', done: 'measured' },
    sendBack: { from: ['measured'], to: 'in-batch', done: 'sent back' },
    review: { from: ['measured'], to: 'reviewed', done: 'reviewed' },
    release: { from: ['reviewed'], to: 'released', done: 'released' },
    /** the measurement is kept and not reported; the determination waits for another batch */
    rerun: { from: ['measured', 'reviewed', 'released'], to: 'requested', done: 'measured again' },
    withdraw: { from: ['requested'], to: 'withdrawn', done: 'withdrawn' },
  },
})
export type DeterminationState = keyof typeof determinationStates.words

export const calibrationStates = defineStates({
  thing: 'calibration',
  words: {
    draft: 'a draft',
    submitted: 'submitted',
    'in-force': 'in force',
    expired: 'expired',
    invalidated: 'invalidated',
    replaced: 'replaced',
    rejected: 'sent back',
  },
  moves: {
    save: { from: ['draft'], to: 'draft', done: 'changed' },
    submit: { from: ['draft'], to: 'submitted', done: 'submitted' },
    sign: { from: ['submitted'], to: 'in-force', done: 'signed' },
    reject: { from: ['submitted'], to: 'rejected', done: 'sent back' },
    expire: { from: ['in-force'], to: 'expired', done: 'expired' },
    invalidate: { from: ['in-force'], to: 'invalidated', done: 'taken out of force' },
    replace: { from: ['in-force'], to: 'replaced', done: 'replaced' },
    carry: { from: ['in-force'], to: 'in-force', done: 'used for results' },
  },
})
export type CalibrationState = keyof typeof calibrationStates.words

export const batchStates = defineStates({
  thing: 'batch',
  words: {
    open: 'open',
    submitted: 'submitted for review',
    reviewed: 'reviewed',
    released: 'released',
    returned: 'sent back',
  },
  moves: {
    read: { from: ['open', 'returned'], to: 'open', done: 'read' },
    submit: { from: ['open', 'returned'], to: 'submitted', done: 'submitted' },
    return: { from: ['submitted'], to: 'returned', done: 'sent back' },
    review: { from: ['submitted'], to: 'reviewed', done: 'reviewed' },
    release: { from: ['submitted', 'reviewed'], to: 'released', done: 'released' },
  },
})
export type BatchState = keyof typeof batchStates.words

export const resultStates = defineStates({
  thing: 'result',
  words: {
    measured: 'measured',
    reviewed: 'reviewed',
    released: 'released',
    'not-reported': 'kept and not reported',
  },
  moves: {
    review: { from: ['measured'], to: 'reviewed', done: 'reviewed' },
    release: { from: ['measured', 'reviewed'], to: 'released', done: 'released' },
    setAside: { from: ['measured', 'reviewed'], to: 'not-reported', done: 'set aside' },
  },
})
export type ResultState = keyof typeof resultStates.words

export const alertStates = defineStates({
  thing: 'alert',
  words: {
    raised: 'raised',
    notified: 'notified',
    acknowledged: 'acknowledged',
    closed: 'closed',
    cancelled: 'cancelled',
  },
  moves: {
    notify: { from: ['raised'], to: 'notified', done: 'notified' },
    acknowledge: { from: ['raised', 'notified'], to: 'acknowledged', done: 'acknowledged' },
    close: { from: ['acknowledged'], to: 'closed', done: 'closed' },
    cancel: { from: ['raised', 'notified', 'acknowledged'], to: 'cancelled', done: 'cancelled' },
  },
})
export type AlertState = keyof typeof alertStates.words

export const certificateStates = defineStates({
  thing: 'certificate',
  words: { issued: 'issued', superseded: 'superseded', withdrawn: 'withdrawn' },
  moves: {
    supersede: { from: ['issued'], to: 'superseded', done: 'amended' },
    withdraw: { from: ['issued'], to: 'withdrawn', done: 'withdrawn' },
  },
})
export type CertificateState = keyof typeof certificateStates.words
export { STATE_MARKS, type StateMark } from './marks.js'

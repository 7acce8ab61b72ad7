import {
  certificateSnapshot,
  determinationName,
  showUnit,
  type CertificateSnapshot,
  type MethodDefinition,
  type PositionLimit,
} from '@weirlight/shared/contracts'
import { applyDilution, convertUnit } from '@weirlight/shared/assay'
import { paths } from '@weirlight/shared/paths'
import { ROLE_NAMES, type Role } from '@weirlight/shared/permissions'
import { CAUTION, toResultRow, type ResultInputs, type ResultRecord } from '../results/index.js'
import type { CertificatesRepository } from './certificates.repository.js'
import { changesBetween } from './changes-between.js'

type Facts = Awaited<ReturnType<CertificatesRepository['facts']>>
type ResultFacts = Awaited<ReturnType<CertificatesRepository['resultFacts']>>[number]
type Line = CertificateSnapshot['results'][number]

export const RULE_WORDS: Record<string, string> = {
  simple: 'simple acceptance: the value as measured; uncertainty is stated, not subtracted',
  rounded: 'the value rounded to the digits of the limit; uncertainty is stated, not subtracted',
  guarded: 'acceptance limit below the limit by the expanded uncertainty',
  'four-zone': 'four zones around the limit by the expanded uncertainty',
}

const FLAG_WORDS: Record<string, string> = {
  'not-detected': 'not detected',
  estimated: 'estimated: between the detection and the quantification limit',
  'above-range': 'estimated: above the highest standard',
  'quantification-above-limit': 'the quantification limit lies above the limit',
  'absorbance-high': 'read at a high absorbance',
  'holding-time-exceeded': 'read after its holding time',
  'read-early': 'read before the colour had developed',
  'read-late': 'read after the reading window',
  'readings-apart': 'its readings lie apart',
  'quality-control-failed': 'a quality-control check of the run failed; see the laboratory',
}

export interface ToSnapshot {
  number: string
  replaces: { number: string; snapshot: CertificateSnapshot } | null
  reason: string
  issuedAt: Date
  verificationCode: string
  publicUrl: string
  laboratory: {
    name: string
    address: string
    accreditation: string
    email: string
    phone: string
    timeZone: string
  }
  facts: Facts
  results: readonly ResultRecord[]
  resultFacts: readonly ResultFacts[]
}

/** Everything the document says, frozen. Checked against its contract, so that no field can be missing in print. */
export function makeSnapshot(given: ToSnapshot): CertificateSnapshot {
  const { facts, laboratory } = given
  const byId = new Map(given.resultFacts.map((row) => [row.id, row]))
  const lines = given.results.map((result) => toLine({ result, more: byId.get(result.id), facts }))
  const inOrder = [...given.results].sort((a, b) => time(a.releasedAt) - time(b.releasedAt))
  const last = inOrder.at(-1)
  const releasers = inOrder.flatMap((row) => byId.get(row.id) ?? [])
  const names = together(releasers.map((row) => row.releaserName ?? ''))
  const roles = together(
    releasers.map((row) => (row.releaserRole ? ROLE_NAMES[row.releaserRole as Role] : '')),
  )
  const snapshot = certificateSnapshot.parse({
    number: given.number,
    title: 'Certificate of analysis',
    issuedAt: given.issuedAt.toISOString(),
    timeZone: laboratory.timeZone,
    replaces: given.replaces?.number ?? null,
    replacementReason: given.reason,
    changes: [],
    laboratory: {
      name: laboratory.name,
      address: laboratory.address,
      accreditation: laboratory.accreditation,
      email: laboratory.email,
      phone: laboratory.phone,
    },
    client: {
      name: facts.clientName,
      address: facts.clientAddress,
      contact: facts.contact ?? '',
      systemId: facts.systemId,
    },
    sample: {
      number: facts.number,
      point: facts.pointName,
      pointCode: facts.pointCode,
      purpose: facts.purpose,
      kind: facts.kind,
      collectedAt: facts.collectedAt.toISOString(),
      collectedBy: facts.collectedBy,
      receivedAt: (facts.receivedAt ?? facts.collectedAt).toISOString(),
      preservation: facts.preservation,
      ph: facts.ph,
      temperatureC: facts.temperatureC,
      condition: facts.condition,
      qualification: facts.acceptanceReason,
    },
    results: lines,
    notes: notesFor({ lines, facts }),
    reviewedBy: names,
    releasedBy: names,
    releasedByRole: roles,
    releasedAt: (last?.releasedAt ?? given.issuedAt).toISOString(),
    verificationCode: given.verificationCode,
    checkUrl: new URL(paths.checkCode(given.verificationCode), given.publicUrl).href,
    caution: CAUTION,
    engineVersion: together(given.results.map((row) => row.engineVersion)),
  })
  const { replaces } = given
  return replaces ? { ...snapshot, changes: changesBetween(replaces.snapshot, snapshot) } : snapshot
}

const together = (words: readonly string[]) => [...new Set(words.filter(Boolean))].join(', ')
const time = (at: Date | null) => at?.getTime() ?? 0

function toLine({
  result,
  more,
  facts,
}: {
  result: ResultRecord
  more: ResultFacts | undefined
  facts: Facts
}): Line {
  const row = toResultRow(result)
  const inputs = result.inputs as unknown as ResultInputs
  const definition = more?.definition as unknown as MethodDefinition | undefined
  const limit = result.limitSnapshot as unknown as PositionLimit | null
  const quantification = convertUnit({
    value: applyDilution({
      concentration: inputs.rules.reportingLimit,
      dilutionFactor: Number(inputs.dilution),
    }).concentration,
    from: 'mg/L',
    to: row.unit,
  })
  return {
    resultId: row.id,
    determination: determinationName(row.analyte, row.form),
    method: more?.code ? `${definition?.title ?? row.methodTitle}` : row.methodTitle,
    edition: definition ? withEditions(definition.source, more?.edition ?? definition.edition) : '',
    text: row.text,
    uncertaintyText: row.uncertaintyText ?? '',
    unit: showUnit(row.unit),
    quantificationLimit: String(Number(quantification.toPrecision(4))),
    limitName: limit?.name ?? '',
    limitValue: limit?.value ?? '',
    limitUnit: limit ? showUnit(limit.unit) : '',
    limitSource: limit?.source ?? '',
    statement: row.verdict === null ? 'no limit' : VERDICT_WORDS[row.verdict],
    decisionRule: limit ? (RULE_WORDS[limit.rule] ?? limit.rule) : '',
    verdict: row.verdict,
    flags: row.flags.map((flag) => FLAG_WORDS[flag] ?? flag),
    analysedAt: more?.readAt?.toISOString() ?? row.measuredAt,
    analyst: more?.analystName ?? '',
    approval: approvalOf({ definition, facts, row }),
    batch: more?.batchNumber ?? row.batchNumber,
    calibration: more?.calibrationNumber ?? '',
  }
}

const VERDICT_WORDS = {
  below: 'below',
  above: 'above',
  'conditional-below': 'below, within uncertainty',
  'conditional-above': 'above, within uncertainty',
} as const

/** Colour methods are not accepted for every legal purpose: the method says for which, and the certificate prints it. */
function approvalOf(given: {
  definition: MethodDefinition | undefined
  facts: Facts
  row: ReturnType<typeof toResultRow>
}): string {
  const found = given.definition?.approvals.find(
    (one) =>
      one.programme === given.facts.programmeCode &&
      one.analyte === given.row.analyte &&
      one.form === given.row.form,
  )
  return (
    found?.statement ??
    'Whether this method is accepted for the purpose is for the primacy agency to say: for operational use, not represented as a compliance result.'
  )
}

function notesFor({ lines, facts }: { lines: readonly Line[]; facts: Facts }): string[] {
  const rules = [
    ...new Set(lines.filter((line) => line.decisionRule !== '').map((line) => line.decisionRule)),
  ]
  const limits = [
    ...new Set(
      lines
        .filter((line) => line.limitName !== '')
        .map((line) => `${line.limitName}: ${line.limitValue} ${line.limitUnit}, ${line.limitSource}`),
    ),
  ]
  return [
    'Results relate only to the sample as received. Sampling, its time and place were reported by the client.',
    ...rules.map((rule) => `Statement: ${rule}.`),
    ...limits.map((limit) => `Limit: ${limit}.`),
    ...new Set(lines.map((line) => line.approval)),
    'U is the expanded uncertainty with coverage factor k = 2, about 95 % confidence.',
    ...(facts.qualified || facts.acceptanceReason !== ''
      ? [`Accepted with a qualification: ${facts.acceptanceReason}`]
      : []),
    ...(facts.clientConsent === '' ? [] : [`The client asked in writing to proceed: ${facts.clientConsent}`]),
    ...lines.flatMap((line) => line.flags.map((flag) => `${line.determination}: ${flag}.`)),
  ]
}

/** “HJ/T 345; ISO 6332” of “2007; 1988” is “HJ/T 345 (2007); ISO 6332 (1988)”. */
export function withEditions(sources: string, editions: string): string {
  const [names, years] = [sources.split('; '), editions.split('; ')]
  if (names.length === 1 || names.length !== years.length) return `${sources}, ${editions}`
  return names.map((name, index) => `${name} (${years[index] ?? ''})`).join('; ')
}

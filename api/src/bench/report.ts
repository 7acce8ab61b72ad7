import { mkdirSync, writeFileSync } from 'node:fs'
import { availableParallelism, cpus, totalmem } from 'node:os'
import { join } from 'node:path'
import type { Measured } from './measured.js'
import type { ScriptSize } from './script-size.js'

export interface Report {
  at: string
  machine: { cores: number; model: string; memoryGb: number; node: string }
  entries: number
  measured: Measured[]
  scripts: ScriptSize[]
}

export const thisMachine = (): Report['machine'] => ({
  cores: availableParallelism(),
  model: cpus()[0]?.model ?? 'unknown',
  memoryGb: Math.round(totalmem() / 2 ** 30),
  node: process.version,
})

/** Two tables as lines of text, their columns aligned. */
export function linesOf(report: Report): string[] {
  const { cores, model, memoryGb, node } = report.machine
  const measured = report.measured.map((one, index) => [
    index % 2 === 0 ? one.name : `  ${one.name}`,
    String(one.atATime),
    String(one.requests),
    one.statements === null ? '–' : String(one.statements),
    ...[one.perSecond, one.p50, one.p95, one.p99].map((value) => value.toFixed(1)),
  ])
  const scripts = report.scripts.map((one) => [
    one.page,
    String(one.files),
    one.scriptKb.toFixed(1),
    one.styleKb.toFixed(1),
  ])
  return [
    `${cores} cores (${model}), ${memoryGb} GB, Node ${node}; product, database and load on the same machine`,
    '',
    ...aligned([
      ['', 'at a time', 'done', 'statements', 'per second', 'p50 ms', 'p95 ms', 'p99 ms'],
      ...measured,
    ]),
    '',
    ...aligned([['Initial load, gzipped', 'files', 'script kB', 'style kB'], ...scripts]),
    'The aim is less than 250 kB of script for what Today needs.',
  ]
}

export function aligned(rows: readonly (readonly string[])[]): string[] {
  const widths = (rows[0] ?? []).map((_, column) => Math.max(...rows.map((row) => row[column]?.length ?? 0)))
  return rows.map((row) =>
    row
      .map((cell, column) =>
        column === 0 ? cell.padEnd(widths[0] ?? 0) : cell.padStart(widths[column] ?? 0),
      )
      .join('  ')
      .trimEnd(),
  )
}

export function keepReport(folder: string, report: Report): string {
  mkdirSync(folder, { recursive: true })
  const file = join(folder, `${report.at.replaceAll(/[:.]/g, '-')}.json`)
  writeFileSync(file, `${JSON.stringify(report, null, 2)}\n`)
  return file
}

// What a suite's machine-readable report says, as numbers of passed, failed and skipped checks.

export const noCounts = { passed: 0, failed: 0, skipped: 0 }

export const addCounts = (a, b) => ({
  passed: a.passed + b.passed,
  failed: a.failed + b.failed,
  skipped: a.skipped + b.skipped,
})

/** A whole tool that either finds something or does not: lint, types, a build. */
export const oneCheck = (code) => (code === 0 ? { ...noCounts, passed: 1 } : { ...noCounts, failed: 1 })

/** Vitest's JSON. A file that could not even be loaded counts as one failure. */
export const vitestCounts = (report) => {
  const files = report.testResults ?? []
  const broken = files.filter((file) => file.status === 'failed' && file.assertionResults.length === 0)
  return {
    passed: report.numPassedTests,
    failed: report.numFailedTests + broken.length,
    skipped: (report.numPendingTests ?? 0) + (report.numTodoTests ?? 0),
  }
}

/** Playwright's JSON. A flaky test passed in the end, but not honestly: it counts as failed. */
export const playwrightCounts = (report) => ({
  passed: report.stats.expected,
  failed: report.stats.unexpected + report.stats.flaky + (report.errors ?? []).length,
  skipped: report.stats.skipped,
})

/** node:test's TAP. */
export const tapCounts = (text) => {
  const number = (word) => Number(new RegExp(`^# ${word} (\\d+)$`, 'm').exec(text)?.[1] ?? 0)
  return {
    passed: number('pass'),
    failed: number('fail') + number('cancelled'),
    skipped: number('skipped') + number('todo'),
  }
}

/**
 * What a suite counts for. A suite that ran nothing, crashed, or left with an error although each of its tests
 * passed has failed once more.
 */
export const settle = ({ counts, code }) => {
  if (!counts) return { ...noCounts, failed: 1 }
  const hasRun = counts.passed + counts.failed > 0
  const isHonest = hasRun && (code === 0 || counts.failed > 0)
  return isHonest ? counts : { ...counts, failed: counts.failed + 1 }
}

export const lastLine = ({ passed, failed, skipped }) =>
  `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`

import { describe, expect, it } from 'vitest'
import { asProblem, parseProblem } from './problem-error'

// every answer here is constructed in the shape of RFC 9457
describe('parseProblem', () => {
  it('keeps code, sentence, request and field errors', () => {
    const problem = parseProblem({
      status: 422,
      body: {
        type: 'about:blank',
        title: 'Invalid input',
        status: 422,
        code: 'invalid-input',
        detail: 'Two fields need another look.',
        requestId: 'r-17',
        errors: [{ path: 'standards.2.readings.0', message: 'Use a decimal point: 0.12.' }, { path: 7 }],
      },
    })
    expect(problem).toMatchObject({
      code: 'invalid-input',
      status: 422,
      message: 'Two fields need another look.',
      requestId: 'r-17',
    })
    expect(problem.errors).toEqual([
      { path: 'standards.2.readings.0', message: 'Use a decimal point: 0.12.' },
    ])
  })
  it('keeps who changed a stale thing and when', () => {
    const conflict = { changedBy: 'Ines Okafor', changedAt: '2026-12-01T14:05:00Z' }
    const problem = parseProblem({
      status: 409,
      body: { code: 'stale', detail: 'Changed meanwhile.', conflict },
    })
    expect(problem.conflict).toEqual(conflict)
  })
  it.each([502, 503, 504])('takes a proxy’s %d without a document for a lost connection', (status) => {
    expect(parseProblem({ status, body: '<html>Bad gateway</html>' }).code).toBe('offline')
  })
  it('takes a busy server at its word', () => {
    const problem = parseProblem({ status: 503, body: { code: 'unavailable', detail: 'Starting.' } })
    expect(problem.code).toBe('unavailable')
  })
  it('knows a session that ended even without a document', () => {
    expect(parseProblem({ status: 401, body: null }).code).toBe('signed-out')
  })
  it('never shows the text of an unknown answer', () => {
    const problem = parseProblem({ status: 500, body: 'TypeError: x is undefined' })
    expect(problem.code).toBe('internal')
    expect(problem.message).not.toContain('TypeError')
  })
})

describe('asProblem', () => {
  it('hides the text of a fault of the page', () => {
    expect(asProblem(new TypeError('secret')).message).not.toContain('secret')
  })
})

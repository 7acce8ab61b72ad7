import { runValidation } from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import { createHash } from 'node:crypto'
import { z } from 'zod'
import { accountOf } from './support/accounts.js'
import { readPdf } from './support/pdf.js'
import { expect, test } from './support/test.js'

const report = z.object({
  engineVersion: z.string(),
  cases: z.number(),
  passed: z.number(),
  failed: z.number(),
  comparisons: z.number(),
  rows: z.array(z.object({ title: z.string(), source: z.string(), mark: z.string(), verdict: z.string() })),
})

test('the QA manager runs the validation, and takes away the report whose hash the page shows', async ({
  as,
}) => {
  const page = await as(accountOf('qa-manager'))
  const runs = page.getByRole('table', { name: 'Validation runs' })
  const newest = runs.getByRole('row').nth(1)

  await test.step('runs it from Settings', async () => {
    await page.goto(paths.settingsValidation)
    const answered = page.waitForResponse((response) => response.request().method() === 'POST')
    await page.getByRole('button', { name: 'Run the validation' }).click()
    const run = runValidation.response.parse(await (await answered).json())
    await expect(page.getByText(`All ${run.cases} cases passed.`)).toBeVisible()
    await expect(newest).toContainText(run.sha256)
    await expect(newest).toContainText(accountOf('qa-manager').name)
    await expect(newest).toContainText('all passed')
  })

  const kept = await test.step('the JSON is the one whose hash stands there', async () => {
    const [file] = await Promise.all([
      page.waitForEvent('download'),
      newest.getByRole('link', { name: 'JSON' }).click(),
    ])
    const chunks: Buffer[] = []
    for await (const chunk of await file.createReadStream()) chunks.push(chunk as Buffer)
    const content = Buffer.concat(chunks)
    await expect(newest).toContainText(createHash('sha256').update(content).digest('hex'))
    return report.parse(JSON.parse(content.toString('utf8')))
  })
  expect(kept.rows).toHaveLength(kept.cases)
  expect(kept.failed).toBe(0)

  await test.step('the PDF opens and holds the same', async () => {
    const link = newest.getByRole('link', { name: 'PDF' })
    // drawn after the answer, on some hundred pages
    await expect(link).toBeVisible({ timeout: 150_000 })
    const answer = await page.request.get((await link.getAttribute('href')) ?? '')
    expect(answer.headers()['content-type']).toContain('application/pdf')
    const { pages, text } = await readPdf(await answer.body())
    expect(text).toContain(
      `${kept.cases} cases, ${kept.comparisons} comparisons: ${kept.passed} passed, 0 failed.`,
    )
    expect(text).toContain(`engine ${kept.engineVersion}`)
    expect(pages.at(-1)).toContain(`Page ${pages.length} of ${pages.length}`)
  })
})

test('others read the runs and cannot start one', async ({ as }) => {
  const page = await as(accountOf('auditor'))
  await page.goto(paths.settingsValidation)
  await expect(page.getByText('Published cases, each with its source')).toBeVisible()
  await expect(page.getByRole('button', { name: 'Run the validation' })).toHaveCount(0)
})

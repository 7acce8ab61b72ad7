import { randomUUID } from 'node:crypto'
import { startCalibration } from '@weirlight/shared/contracts'
import { accountOf } from '../support/accounts.js'
import { ironPoint, methodId } from '../support/set-up.js'
import { expect, test } from '../support/test.js'

test('a calibration with a missing standard is not submitted, and says what is missing where', async ({
  as,
  apiOf,
}) => {
  const technician = accountOf('technician', 2)
  const api = await apiOf(technician)
  const instruments = await api.file('/api/instruments')
  const [instrument] = (JSON.parse(instruments.toString()) as { items: { id: string }[] }).items
  const standard = (concentration: string, readings: string[]) => ({
    role: 'standard' as const,
    concentration,
    lotId: null,
    leftOutReason: '',
    readings,
  })
  const draft = await api.call(startCalibration, {
    body: {
      draftId: randomUUID(),
      methodId: await methodId(api, ironPoint.method),
      instrumentId: instrument?.id ?? '',
      cellPathCm: '2',
      stockLotId: null,
      reagentLotIds: [],
      model: 'linear',
      weighting: 'none',
      colourStartedAt: null,
      temperatureC: '',
      note: '',
      // constructed: about 0.39 A per mg/L in 2 cm
      standards: [
        standard('0', ['0.0010']),
        standard('0.05', ['0.0205']),
        standard('0.5', ['0.1960']),
        standard('1', ['']),
      ],
    },
  })
  const page = await as(technician)
  await page.goto(`/calibrations/${draft.id}`)
  await page.getByRole('button', { name: 'Submit for signature' }).click()
  await page.getByRole('dialog').getByRole('button', { name: 'Submit', exact: true }).click()
  const dialog = page.getByRole('dialog')
  await expect(dialog.getByRole('alert').first()).toBeVisible()
  await dialog.getByRole('button', { name: 'Cancel' }).click()
  const main = page.getByRole('main')
  await expect(main).toContainText('At least 5 standards above zero are needed; there are 2.')
  await expect(main).toContainText('Choose the lot the standards were made from')
  await expect(main).toContainText(/1 mg\/L.* was not read/)
  await expect(page.getByText('Draft', { exact: true }).first()).toBeVisible()
})

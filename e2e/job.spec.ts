import { accountOf } from './support/accounts.js'
import { startCalibration } from './support/calibrating.js'
import { test } from './support/test.js'
import { expectNoHand, findEveryStep, followTheNumber, narrowTheHistory } from './job/auditor.js'
import { answerAlert, readCertificate } from './job/client.js'
import { openSubmitted, releaseBatch, sendCalibrationBack, signCalibration } from './job/manager.js'
import { METALS } from './job/metals.js'
import { calibrate, receiveSamples, runBatch, startOver } from './job/technician.js'
import { setOut, type Way } from './job/way.js'

for (const metal of METALS) {
  test(`${metal.name}: from the bottle to the certificate`, async ({ as, apiOf }) => {
    const start = await setOut(metal, apiOf)
    const atBench = await as(start.technician)
    const atDesk = await as(start.manager)
    const atClient = await as(start.client)

    const bottles = await test.step('1. the technician receives samples', () =>
      receiveSamples(atBench, start))
    const way: Way = { ...start, ...bottles }

    const calibration =
      await test.step('2. and 3. a calibration: typed, submitted, signed by another', async () => {
        await startCalibration(atBench, metal)
        let made = await calibrate(atBench, way)
        await openSubmitted(atDesk, way, made.number)
        if (metal.isSentBackFirst) {
          const reason = await sendCalibrationBack(atDesk)
          await startOver(atBench, { number: made.number, reason })
          made = await calibrate(atBench, way)
          await openSubmitted(atDesk, way, made.number)
        }
        await signCalibration(atDesk, way)
        return made
      })

    const batch = await test.step('4. a batch from what waits, its readings, submitted', () =>
      runBatch(atBench, way, calibration))
    const reported = batch.rows.find((row) => row.sampleNumber === way.high)?.assessment.reportedText ?? ''

    await test.step('5. the QA manager reviews and releases with a signature', () =>
      releaseBatch(atDesk, way, { batch, reported }))

    await test.step('6. the alert is mailed and acknowledged', () => answerAlert(atClient, way, reported))

    const certificate = await test.step('7. the certificate is mailed, downloaded and read', () =>
      readCertificate(atClient, way, batch))

    await test.step('8. the auditor follows it all back and can change nothing', async () => {
      const auditor = accountOf('auditor')
      const page = await as(auditor)
      const audited = { calibration: calibration.number, certificate, batch, reported }
      await findEveryStep(page, way, audited)
      await narrowTheHistory(page, way, audited)
      await followTheNumber(page, way, audited)
      await expectNoHand(page, await apiOf(auditor), audited)
    })
  })
}

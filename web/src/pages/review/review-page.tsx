import { BatchesToReview } from '../../features/batches'
import { CalibrationsToSign } from '../../features/calibrations'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'

export function ReviewPage() {
  return (
    <MarginPage
      title="Review"
      subtitle="By the clock that runs out first"
      notes={[
        'What was changed by hand comes first, then failed checks and what was done, then the rest.',
        'Nobody releases what they read themselves.',
      ]}
    >
      <div className="stack">
        <BatchesToReview rowTo={paths.reviewBatch} />
        <CalibrationsToSign />
      </div>
    </MarginPage>
  )
}

import { useQuery } from '@tanstack/react-query'
import { paths, useCan } from '../../../lib'
import { Loaded } from '../../../ui'
import { batchQuery } from '../api/batch-queries'
import { BatchRecord } from './batch-record'
import { RunSheetPage } from './run-sheet-page'

const LIST = { to: paths.batches, label: 'Batches' }
/** the others at the bench, and what they enter, are seen within this time */
const REFRESH = 15_000

/** One batch: the run sheet while it is read, the record ever after. */
export function BatchById({ id }: { id: string }) {
  const may = useCan()
  const query = useQuery({ ...batchQuery(id), refetchInterval: REFRESH })
  return (
    <Loaded query={query} skeleton="page" what="batch" back={LIST}>
      {(batch) =>
        (batch.state === 'open' || batch.state === 'returned') && may('batches.run') ? (
          <RunSheetPage key={batch.id} batch={batch} />
        ) : (
          <BatchRecord key={batch.id} batch={batch} />
        )
      }
    </Loaded>
  )
}

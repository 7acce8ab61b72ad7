import { useQuery } from '@tanstack/react-query'
import { ENGINE_VERSION } from '@weirlight/shared/assay'
import { getHealth, type ResponseOf } from '@weirlight/shared/contracts'
import { asProblem, queryFor } from '../../../lib'
import { Box, Failed, KeyValues, SkeletonLines, StatusTag, Strip } from '../../../ui'

type Health = ResponseOf<typeof getHealth>
type Part = 'database' | 'jobs' | 'mail'

const ANSWERS = { word: 'answers', shape: 'disc', tone: 'meets' } as const
const SILENT = { word: 'does not answer', shape: 'triangle', tone: 'above' } as const

const PARTS: Record<Part, { title: string; failing: string }> = {
  database: {
    title: 'Database',
    failing:
      'Nothing can be read or saved. What people entered stays on their computers until it answers again.',
  },
  jobs: {
    title: 'Job queue',
    failing: 'Certificates are not drawn and no seal is set until it moves again. Nothing is lost.',
  },
  mail: {
    title: 'Mail server',
    failing: 'Alerts and certificates wait and leave once it answers. Tell clients by telephone meanwhile.',
  },
}

/** The words for how the installation stands, refreshed every half minute. */
export function HealthBox() {
  const query = useQuery({ ...queryFor(getHealth), refetchInterval: 30_000, staleTime: 0 })
  if (query.isError && !query.data)
    return <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
  return (
    <div className="stack sheet-narrow">
      {query.isError && (
        <Strip tone="above" isAlert>
          The server does not answer just now; what stands below is from before.
        </Strip>
      )}
      {query.data ? <Parts health={query.data} /> : <SkeletonLines lines={4} />}
      <Box title="Versions">
        <KeyValues
          items={[
            { term: 'Application', detail: String(import.meta.env['VITE_VERSION'] ?? 'being developed') },
            { term: 'Calculations', detail: ENGINE_VERSION },
          ]}
        />
        <p className="note box-foot">
          Every result keeps the version of the calculations it was made with, so that it can be computed
          again.
        </p>
      </Box>
    </div>
  )
}

function Parts({ health }: { health: Health }) {
  const failing = (Object.keys(PARTS) as Part[]).filter((part) => health[part] === 'failing')
  return (
    <>
      {failing.map((part) => (
        <Strip key={part} tone="above" title={PARTS[part].title} isAlert>
          {PARTS[part].failing}
        </Strip>
      ))}
      <Box title={failing.length === 0 ? 'Everything answers' : 'Something does not answer'}>
        <KeyValues
          items={(Object.keys(PARTS) as Part[]).map((part) => ({
            term: PARTS[part].title,
            detail: <StatusTag mark={health[part] === 'ok' ? ANSWERS : SILENT} />,
          }))}
        />
      </Box>
    </>
  )
}

import { useQuery } from '@tanstack/react-query'
import { ROLE_NAMES, type Role } from '@weirlight/shared/permissions'
import { TodayLines, todayQuery } from '../../features/today'
import { useSession } from '../../lib/session'
import { dayOf, formatInstantWithOffset, hourOf, weekday } from '../../lib/time'
import { useNow } from '../../lib/use-now'
import { MarginPage } from '../../ui/margin-page'
import { Loaded } from '../../ui/page-states'
import { Bar } from '../../ui/sheet'

const WHAT_YOU_DO: Record<Role, string> = {
  technician: 'You receive, calibrate and measure.',
  'qa-manager': 'You sign calibrations, review and release.',
  auditor: 'You see everything and change nothing.',
  administrator: 'You look after people, mail and the laboratory’s particulars.',
  client: 'You see your utility’s results.',
}

function greeting(hour: number): string {
  if (hour < 5) return 'Good night'
  if (hour < 12) return 'Good morning'
  return hour < 18 ? 'Good afternoon' : 'Good evening'
}

export function TodayPage() {
  const { name, role, timeZone } = useSession()
  const now = useNow()
  const today = useQuery(todayQuery)
  const stated = new Date(now).toISOString()
  const firstName = name.split(' ')[0] ?? name
  const facts = (today.data?.facts ?? []).map((fact) => ({ term: fact.heading, detail: fact.text }))
  return (
    <MarginPage
      title={`${greeting(hourOf(now, timeZone))}, ${firstName}`}
      subtitle={
        <time dateTime={dayOf(now, timeZone)}>
          {weekday(now, timeZone)}, {formatInstantWithOffset(stated, timeZone)}
        </time>
      }
      facts={[{ term: 'You', detail: `${ROLE_NAMES[role]}. ${WHAT_YOU_DO[role]}` }, ...facts]}
      foldLabel="You and the bench"
      bar={<Bar lead={<h2>What needs you, by the clock that runs out first</h2>} />}
    >
      <Loaded query={today}>{(data) => <TodayLines lines={data.lines} />}</Loaded>
    </MarginPage>
  )
}

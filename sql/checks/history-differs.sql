-- The state that history last wrote down is the state the row has.
with last as (
  select distinct on (thing, thing_id) thing, thing_id, new ->> 'state' as state
  from history
  where thing in ('samples', 'determinations', 'calibrations', 'batches', 'results', 'alerts', 'certificates')
    and new ? 'state'
  order by thing, thing_id, id desc
), now as (
  select 'samples' as thing, id, state from samples
  union all select 'determinations', id, state from determinations
  union all select 'calibrations', id, state from calibrations
  union all select 'batches', id, state from batches
  union all select 'results', id, state from results
  union all select 'alerts', id, state from alerts
  union all select 'certificates', id, state from certificates
)
select now.thing, now.id, now.state, last.state as written_down
from now left join last on last.thing = now.thing and last.thing_id = now.id
where now.state is distinct from last.state

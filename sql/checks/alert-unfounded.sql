-- An alert stands on a released result of its own client, above a limit.
select a.number as alert, r.state, r.verdict
from alerts a join results r on r.id = a.result_id
where r.state <> 'released' or a.client_id <> r.client_id or r.verdict is null or r.verdict not in ('above', 'conditional-above')

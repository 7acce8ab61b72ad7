-- A released result above a limit that raises alerts has its alert.
select r.id as result_id, s.number as sample, l.name as limit_name
from results r join limits l on l.id = r.limit_id join samples s on s.id = r.sample_id
where r.state = 'released' and r.verdict in ('above', 'conditional-above') and l.raises_alert
  and not exists (select from alerts a where a.result_id = r.id)

-- A released result above a limit that raises alerts has its alert.
select r.id from results r join limits l on l.id = r.limit_id
where r.state = 'released' and r.verdict = 'above' and l.raises_alert
  and not exists (select from alerts a where a.result_id = r.id)

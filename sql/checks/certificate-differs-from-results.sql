-- What a certificate says is what was released.
select c.number as certificate, line."resultId" as result_id, line.text as printed, r.reported_text as released
from certificates c
cross join lateral jsonb_to_recordset(c.snapshot -> 'results') as line("resultId" bigint, text text, "uncertaintyText" text, verdict text)
left join certificate_results cr on cr.certificate_id = c.id and cr.result_id = line."resultId"
left join results r on r.id = cr.result_id
where r.id is null
  or (line.text, line."uncertaintyText", line.verdict) is distinct from (r.reported_text, r.uncertainty_text, r.verdict)

-- What was signed at release is what stands now: every number, text, verdict and flag.
select s.id as signature_id, b.number as batch, signed.result as result_id, signed.text as signed_text, r.reported_text as text
from signatures s
join batches b on b.id = s.thing_id
cross join lateral jsonb_to_recordset(s.content) as signed(result bigint, state text, concentration float8, text text, unit text,
  uncertainty text, verdict text, flags text[], "engineVersion" text)
left join results r on r.id = signed.result and r.batch_id = b.id
where s.thing = 'batches' and s.meaning = 'released'
  and (r.id is null or (r.state, r.concentration, r.reported_text, r.unit, r.uncertainty_text, r.verdict, r.flags, r.engine_version)
    is distinct from (signed.state, signed.concentration, signed.text, signed.unit, signed.uncertainty, signed.verdict, signed.flags,
      signed."engineVersion"))

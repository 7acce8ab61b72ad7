-- A certificate holds results of its own sample alone, at least one, and each was released.
select c.number as certificate, r.id as result_id, r.state
from certificates c
left join certificate_results cr on cr.certificate_id = c.id
left join results r on r.id = cr.result_id
where r.id is null or r.state <> 'released' or r.sample_id <> c.sample_id

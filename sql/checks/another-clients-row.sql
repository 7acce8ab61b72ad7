-- Whatever belongs to a sample belongs to the sample's client.
select 'determination' as kind, d.id from determinations d join samples s on s.id = d.sample_id where d.client_id <> s.client_id
union all
select 'result', r.id from results r join samples s on s.id = r.sample_id join determinations d on d.id = r.determination_id
where r.client_id <> s.client_id or r.sampling_point_id <> s.sampling_point_id or d.sample_id <> s.id
union all
select 'certificate', c.id from certificates c join samples s on s.id = c.sample_id where c.client_id <> s.client_id
union all
select 'sample', s.id from samples s join sampling_points p on p.id = s.sampling_point_id where p.client_id <> s.client_id

-- Every sample, batch and result was written into history when it was made.
select 'samples' as thing, s.id from samples s
where not exists (select from history h where h.thing = 'samples' and h.thing_id = s.id and h.operation = 'insert')
union all
select 'batches', b.id from batches b
where not exists (select from history h where h.thing = 'batches' and h.thing_id = b.id and h.operation = 'insert')
union all
select 'results', r.id from results r
where not exists (select from history h where h.thing = 'results' and h.thing_id = r.id and h.operation = 'insert')

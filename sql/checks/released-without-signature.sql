-- A released result stands under a signature of whoever released it, on its batch.
select r.id as result_id, b.number as batch, r.released_by
from results r join batches b on b.id = r.batch_id
where r.state = 'released'
  and (r.released_by is null or b.state <> 'released' or not exists (
    select from signatures s where s.thing = 'batches' and s.thing_id = r.batch_id and s.meaning = 'released'
      and s.user_id = r.released_by))

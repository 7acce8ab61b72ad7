-- Every released result stands in a batch that somebody signed as released.
select r.id from results r
where r.state = 'released'
  and not exists (select from signatures s where s.thing = 'batches' and s.thing_id = r.batch_id and s.meaning = 'released')

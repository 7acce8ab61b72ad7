-- Things that move together stand where they should beside each other.
select 'a released determination without a released result' as what, d.id from determinations d
where d.state = 'released' and not exists (select from results r where r.determination_id = d.id and r.state = 'released')
union all
select 'a released result of a determination that is not released', r.id from results r join determinations d on d.id = r.determination_id
where r.state = 'released' and d.state <> 'released'
union all
select 'a determination in a batch, and no such batch at the bench', d.id from determinations d
where d.state = 'in-batch' and not exists (
  select from positions p join batches b on b.id = p.batch_id where p.determination_id = d.id and b.state in ('open', 'returned'))
union all
select 'a measured determination, and no submitted batch', d.id from determinations d
where d.state in ('measured', 'reviewed') and not exists (
  select from positions p join batches b on b.id = p.batch_id where p.determination_id = d.id and b.state in ('submitted', 'reviewed'))
union all
select 'an unsettled result of a released batch', r.id from results r join batches b on b.id = r.batch_id
where b.state = 'released' and r.state not in ('released', 'not-reported')
union all
select 'a settled result of a batch that is not released', r.id from results r join batches b on b.id = r.batch_id
where b.state <> 'released' and r.state in ('released', 'not-reported')
union all
select 'a submitted sample position without a result', p.id from positions p join batches b on b.id = p.batch_id
where p.kind = 'sample' and b.state in ('submitted', 'reviewed', 'released') and not exists (select from results r where r.position_id = p.id)
union all
select 'a sample in analysis with nothing left to do', s.id from samples s
where s.state = 'in-analysis' and not exists (
  select from determinations d where d.sample_id = s.id and d.state not in ('released', 'withdrawn'))
union all
select 'two batches at the bench hold one determination', p.determination_id from positions p join batches b on b.id = p.batch_id
where p.determination_id is not null and b.state in ('open', 'returned', 'submitted', 'reviewed')
group by p.determination_id having count(*) > 1

-- Nobody released a batch that they submitted, or in which they entered a reading or explained a finding.
select b.number as batch, b.released_by
from batches b
where b.state = 'released' and (b.released_by = b.submitted_by
  or exists (select from position_readings r where r.batch_id = b.id and r.read_by = b.released_by)
  or exists (select from finding_actions f where f.batch_id = b.id and f.by_id = b.released_by))

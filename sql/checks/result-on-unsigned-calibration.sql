-- Only a calibration that was signed carries results, and nobody signed their own.
select b.number as batch, k.number as calibration, k.state, k.signed_by
from batches b join calibrations k on k.id = b.calibration_id
where k.signed_at is null or k.signed_by is null or k.signed_by = k.prepared_by or not exists (
  select from signatures s where s.thing = 'calibrations' and s.thing_id = k.id and s.meaning = 'accepted for use')

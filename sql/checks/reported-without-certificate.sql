-- A sample that is reported has a certificate.
select s.number as sample
from samples s
where s.state = 'reported' and not exists (select from certificates c where c.sample_id = s.id)

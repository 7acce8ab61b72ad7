-- A document is made within minutes; one that is a day late will not come by itself.
select c.number as certificate, c.issued_at
from certificates c
where c.issued_at < weirlight_now() - interval '1 day'
  and not exists (select from certificate_documents d where d.certificate_id = c.id)

-- A certificate issued a day ago has its document.
select c.id from certificates c left join certificate_documents d on d.certificate_id = c.id
where d.certificate_id is null and c.issued_at < now() - interval '1 day'

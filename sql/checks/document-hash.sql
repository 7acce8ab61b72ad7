-- A stored document is the one its hash was taken of.
select c.number as certificate, d.sha256 as kept, encode(sha256(d.pdf), 'hex') as found
from certificate_documents d join certificates c on c.id = d.certificate_id
where d.sha256 <> encode(sha256(d.pdf), 'hex')

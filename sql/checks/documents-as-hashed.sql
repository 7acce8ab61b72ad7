-- A stored certificate is the one its hash was taken of.
select certificate_id from certificate_documents where sha256 <> encode(sha256(pdf), 'hex')

-- A certificate names results that are released.
select cr.certificate_id, cr.result_id from certificate_results cr join results r on r.id = cr.result_id
where r.state <> 'released'

-- No result stands on a calibration that nobody signed, or that its own preparer signed.
select r.id from results r join calibrations k on k.id = r.calibration_id
where k.signed_by is null or k.signed_by = k.prepared_by

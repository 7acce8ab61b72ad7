-- A corrected reading supersedes one of its own cell, with a reason.
select later.id from position_readings later join position_readings earlier on earlier.id = later.supersedes_id
where later.position_id <> earlier.position_id or later.replicate <> earlier.replicate or later.reason = ''

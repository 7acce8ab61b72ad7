-- In each cell one reading counts: each is superseded once at most, and by a reading of the same cell.
select 'position' as kind, r.supersedes_id as reading_id, count(*) as times
from position_readings r where r.supersedes_id is not null group by r.supersedes_id having count(*) > 1
union all
select 'position', a.id, 0 from position_readings a join position_readings b on b.id = a.supersedes_id
where (a.position_id, a.replicate) <> (b.position_id, b.replicate)
union all
select 'position', min(r.id), count(*) from position_readings r
where not exists (select from position_readings later where later.supersedes_id = r.id)
group by r.position_id, r.replicate having count(*) > 1
union all
select 'calibration', r.supersedes_id, count(*)
from calibration_readings r where r.supersedes_id is not null group by r.supersedes_id having count(*) > 1
union all
select 'calibration', a.id, 0 from calibration_readings a join calibration_readings b on b.id = a.supersedes_id
where (a.standard_id, a.replicate) <> (b.standard_id, b.replicate)
union all
select 'calibration', min(r.id), count(*) from calibration_readings r
where not exists (select from calibration_readings later where later.supersedes_id = r.id)
group by r.standard_id, r.replicate having count(*) > 1

-- A sample has one current certificate, and a superseded one names what replaced it.
select s.number as sample, string_agg(c.number, ', ') as certificates
from certificates c join samples s on s.id = c.sample_id
where c.state = 'issued'
group by s.id having count(*) > 1
union all
select s.number, c.number
from certificates c join samples s on s.id = c.sample_id
where c.state = 'superseded' and not exists (select from certificates later where later.amends_id = c.id)

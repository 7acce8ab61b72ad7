-- Collected, received, read, submitted, released, issued: in this order.
select 'sample' as kind, s.number from samples s where s.received_at < s.collected_at
union all
select 'batch', b.number from batches b where b.submitted_at < b.opened_at or b.released_at < b.submitted_at
union all
select 'reading', b.number from batches b join position_readings r on r.batch_id = b.id
where r.read_at < b.opened_at or r.read_at > b.submitted_at
union all
select 'result', b.number from results r join batches b on b.id = r.batch_id where r.released_at < r.measured_at
union all
select 'certificate', c.number from certificates c join certificate_results cr on cr.certificate_id = c.id
join results r on r.id = cr.result_id where c.issued_at < r.released_at
union all
select 'alert', a.number from alerts a
where a.notified_at < a.raised_at or a.acknowledged_at < a.raised_at or a.closed_at < coalesce(a.acknowledged_at, a.raised_at)

-- What was released, or set aside, stays as it was signed: the application may move a result there, and then change nothing
-- of it any more. A correction is a new measurement of the determination.
create function keep_settled_result() returns trigger language plpgsql
  set search_path = public, pg_temp as $$
begin
  if tg_op = 'UPDATE' and old.state in ('measured', 'reviewed') then return new; end if;
  if tg_op = 'UPDATE' and new is not distinct from old then return new; end if;
  raise exception 'A result that was released or set aside is kept as it was signed.' using errcode = 'WL002';
end $$;
create trigger b_keep_settled before update or delete on results for each row execute function keep_settled_result();

-- The limit that made the alert. A result may lie above two limits and be reported against the other one.
alter table alerts add column limit_id bigint references limits;
alter table alerts add column limit_snapshot jsonb;

-- A message leaves or fails within a day; one that is still on its way then has been forgotten.
select m.id, m.key, m.state, m.next_attempt_at from mail_messages m
where m.state in ('waiting', 'sending') and m.created_at < weirlight_now() - interval '1 day'

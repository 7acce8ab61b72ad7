-- What every regulated table stands on: the clock, history, seals, mail, sessions. It knows no feature.
-- Run by the owner's role. The application signs in with another role (setting weirlight.app_role).

create extension if not exists pg_trgm;

-- ---------------------------------------------------------------- roles

create function app_role() returns text language sql stable as $$
  select coalesce(nullif(current_setting('weirlight.app_role', true), ''), 'weirlight_app')
$$;

-- grant_to_app('select, insert', 'clients') or grant_to_app('usage', 'sample_numbers')
create function grant_to_app(privileges text, relation regclass) returns void language plpgsql as $$
declare
  kind "char" := (select relkind from pg_class where oid = relation);
begin
  if privileges !~ '^[a-z]+( *\([a-z0-9_, ]+\))?(, *[a-z]+( *\([a-z0-9_, ]+\))?)*$' then
    raise exception 'Not a list of privileges: %', privileges;
  end if;
  execute format('grant %s on %s %s to %I', privileges,
    case when kind = 'S' then 'sequence' else 'table' end, relation, app_role());
end $$;

do $$ begin execute format('grant usage on schema public to %I', app_role()); end $$;

-- ---------------------------------------------------------------- the clock

-- Only a session of the role that owns the records may set another time (weirlight.now): that is how the
-- demonstration's past is loaded. session_user cannot be changed by SET ROLE, so the application cannot.
create function weirlight_now() returns timestamptz language plpgsql volatile
  set search_path = public, pg_temp as $$
declare
  wanted text := nullif(current_setting('weirlight.now', true), '');
begin
  if wanted is not null
    and session_user = (select pg_get_userbyid(relowner) from pg_class where oid = 'public.history'::regclass)
  then
    return wanted::timestamptz;
  end if;
  return clock_timestamp();
end $$;

-- stamp_times('samples', 'received_at'): whatever the statement says, a named column that gets a value
-- gets the server's time.
create function stamp_times_row() returns trigger language plpgsql
  set search_path = public, pg_temp as $$
declare
  before jsonb := case when tg_op = 'UPDATE' then to_jsonb(old) else '{}'::jsonb end;
  after jsonb := to_jsonb(new);
  stamps jsonb := '{}';
  name text;
  at timestamptz;
begin
  foreach name in array tg_argv loop
    if after -> name is distinct from coalesce(before -> name, 'null'::jsonb) and after ->> name is not null then
      at := coalesce(at, weirlight_now());
      stamps := stamps || jsonb_build_object(name, at);
    end if;
  end loop;
  if stamps = '{}'::jsonb then return new; end if;
  return jsonb_populate_record(new, stamps);
end $$;

create function stamp_times(relation regclass, variadic columns name[]) returns void language plpgsql as $$
declare
  found_columns int := (select count(*) from pg_attribute
    where attrelid = relation and attname = any(columns) and atttypid = 'timestamptz'::regtype and not attisdropped);
begin
  if found_columns <> cardinality(columns) then
    raise exception 'stamp_times(%): not all of % are timestamptz columns', relation, columns;
  end if;
  -- the leading "a" makes it run before other row triggers, which fire in the order of their names
  execute format('create trigger a_stamp_times before insert or update on %s for each row execute function stamp_times_row(%s)',
    relation, (select string_agg(quote_literal(c), ', ') from unnest(columns) c));
end $$;

-- ---------------------------------------------------------------- history

create table history (
  id bigint generated always as identity,
  at timestamptz not null,
  -- null when the system itself acted: a job, or a sign-in before anybody is known
  actor_id bigint,
  actor_name text not null,
  actor_role text not null,
  action text not null,
  reason text,
  request_id text,
  thing text not null,
  thing_id bigint,
  thing_number text,
  client_id bigint,
  -- insert: new; delete: old; update: only the changed columns, on both sides
  operation text not null check (operation in ('insert', 'update', 'delete')),
  old jsonb,
  new jsonb,
  primary key (at, id)
) partition by range (at);

create table history_default partition of history default;

-- Every list of history is read newest first and paged by (at, id); the partitions are ranges of `at`,
-- so PostgreSQL reads them one after another and stops at the page's end.
create index history_by_actor on history (actor_id, at desc, id desc);
create index history_by_thing on history (thing, thing_id, at desc, id desc);
create index history_by_action on history (action, at desc, id desc);
create index history_by_client on history (client_id, at desc, id desc) where client_id is not null;
create index history_by_number on history (thing_number, at desc, id desc) where thing_number is not null;
-- sealing walks entries by id
create index history_by_id on history (id);

-- Makes the monthly partitions from one month to another, both included; rows that already fell into the
-- default partition move with it. Called ahead of time by a job, and by the loader of the demo's past.
create function history_make_partitions(first_month date, last_month date) returns int language plpgsql
  security definer set search_path = public, pg_temp as $$
declare
  month date := date_trunc('month', first_month);
  partition_name text;
  made int := 0;
  from_at timestamptz;
  to_at timestamptz;
begin
  if last_month > first_month + interval '20 years' then raise exception 'Too many months'; end if;
  perform pg_advisory_xact_lock(hashtext('weirlight.history.partitions'));
  while month <= last_month loop
    partition_name := format('history_y%sm%s', to_char(month, 'YYYY'), to_char(month, 'MM'));
    if to_regclass('public.' || partition_name) is null then
      from_at := month::timestamp at time zone 'UTC';
      to_at := (month + interval '1 month')::timestamp at time zone 'UTC';
      execute format('create table %I (like history including defaults including constraints)', partition_name);
      -- the parent's trigger stands on the default partition too; moving a row is not changing it
      alter table history_default disable trigger refuse_change;
      execute format('with moved as (delete from history_default where at >= %L and at < %L returning *)
        insert into %I select * from moved', from_at, to_at, partition_name);
      alter table history_default enable trigger refuse_change;
      execute format('alter table history attach partition %I for values from (%L) to (%L)',
        partition_name, from_at, to_at);
      made := made + 1;
    end if;
    month := month + interval '1 month';
  end loop;
  return made;
end $$;

-- Secrets are never copied into history; that they changed is. Of a file, its length and hash are kept.
create function history_plain(key text, value jsonb) returns jsonb language sql immutable as $$
  select case
    when value = 'null'::jsonb then value
    when key ~ '(password|passphrase|token|secret)(_hash)?$' then '"(hidden)"'::jsonb
    when jsonb_typeof(value) = 'string' and length(value #>> '{}') > 20000 then
      to_jsonb(format('(%s characters, SHA-256 %s)', length(value #>> '{}'),
        encode(sha256(convert_to(value #>> '{}', 'UTF8')), 'hex')))
    else value end
$$;

create function history_plain(row_values jsonb) returns jsonb language sql immutable as $$
  select jsonb_object_agg(key, history_plain(key, value)) from jsonb_each(row_values)
$$;

create function write_history() returns trigger language plpgsql
  security definer set search_path = public, pg_temp as $$
declare
  who text := nullif(current_setting('weirlight.actor_name', true), '');
  did text := nullif(current_setting('weirlight.action', true), '');
  before jsonb := case when tg_op <> 'INSERT' then to_jsonb(old) end;
  after jsonb := case when tg_op <> 'DELETE' then to_jsonb(new) end;
  row_now jsonb := coalesce(after, before);
  id_column text := tg_argv[0];
begin
  if who is null or did is null then
    raise exception 'A change of % needs an actor and an action: use Database.transaction.', tg_table_name
      using errcode = 'WL001';
  end if;
  -- Shared with every other writer, exclusive for the sealer: no entry can appear behind a seal.
  perform pg_advisory_xact_lock_shared(7236004);
  if tg_op = 'UPDATE' then
    select jsonb_object_agg(key, before -> key), jsonb_object_agg(key, value) into before, after
    from jsonb_each(after) where value is distinct from before -> key;
    if after is null then return null; end if;
  end if;
  insert into history (at, actor_id, actor_name, actor_role, action, reason, request_id,
    thing, thing_id, thing_number, client_id, operation, old, new)
  values (weirlight_now(),
    nullif(current_setting('weirlight.actor_id', true), '')::bigint,
    who,
    coalesce(nullif(current_setting('weirlight.actor_role', true), ''), 'system'),
    did,
    nullif(current_setting('weirlight.reason', true), ''),
    nullif(current_setting('weirlight.request_id', true), ''),
    tg_table_name,
    (row_now ->> id_column)::bigint,
    row_now ->> 'number',
    case when tg_table_name = 'clients' then (row_now ->> 'id')::bigint else (row_now ->> 'client_id')::bigint end,
    lower(tg_op),
    history_plain(before),
    history_plain(after));
  return null;
end $$;

-- A trigger function runs for any table it is attached to: on a table of its own the application could forge
-- entries. Attaching asks for EXECUTE; firing does not.
revoke execute on function write_history() from public;

-- watch_history('samples'); a table without an id of its own names its parent's: watch_history('links', 'parent_id')
create function watch_history(relation regclass, id_column name default 'id') returns void language plpgsql as $$
begin
  if not exists (select from pg_attribute where attrelid = relation and attname = id_column and not attisdropped) then
    raise exception 'watch_history(%): no column %', relation, id_column;
  end if;
  execute format('create trigger z_history after insert or update or delete on %s for each row execute function write_history(%L)',
    relation, id_column);
end $$;

create function refuse_history_change() returns trigger language plpgsql as $$
begin
  raise exception 'History is written once and never changed.' using errcode = 'WL002';
end $$;
create trigger refuse_change before update or delete on history for each row execute function refuse_history_change();
create trigger refuse_truncate before truncate on history for each statement execute function refuse_history_change();

-- forbid_change('readings', 'superseded_by'): rows stay as written, but for the named columns.
create function forbid_change_row() returns trigger language plpgsql
  set search_path = public, pg_temp as $$
declare
  changed text;
begin
  if tg_op = 'DELETE' then
    raise exception 'Rows of % are kept for good.', tg_table_name using errcode = 'WL002';
  end if;
  select string_agg(key, ', ') into changed from jsonb_each(to_jsonb(new))
    where value is distinct from to_jsonb(old) -> key and not key = any(tg_argv);
  if changed is not null then
    raise exception 'Rows of % are kept as written: % cannot change.', tg_table_name, changed using errcode = 'WL002';
  end if;
  return new;
end $$;

create function forbid_change(relation regclass, variadic allowed_columns name[] default '{}') returns void language plpgsql as $$
begin
  execute format('create trigger b_forbid_change before update or delete on %s for each row execute function forbid_change_row(%s)',
    relation, coalesce((select string_agg(quote_literal(c), ', ') from unnest(allowed_columns) c), ''));
end $$;

-- the system's own partitions: two months back (late seals, imports), a year ahead
select history_make_partitions((now() - interval '2 months')::date, (now() + interval '12 months')::date);
select grant_to_app('select', 'history');

-- ---------------------------------------------------------------- seals

-- What a leaf of the Merkle tree is made of: one line of text per entry, the same on every server.
create function history_leaf(entry history) returns text language sql immutable
  set timezone = 'UTC' as $$
  select jsonb_build_array(entry.id, to_char(entry.at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"'),
    entry.actor_id, entry.actor_name, entry.actor_role, entry.action, entry.reason, entry.request_id,
    entry.thing, entry.thing_id, entry.thing_number, entry.client_id, entry.operation, entry.old, entry.new)::text
$$;

-- Each seal closes the entries from first_id to last_id, none of them sealed before, into a Merkle tree (RFC 9162, section 2.1) and chains its
-- root to the seal before it.
create table history_seals (
  number bigint primary key,
  sealed_at timestamptz not null,
  first_id bigint not null,
  last_id bigint not null,
  entries bigint not null check (entries > 0),
  root bytea not null check (length(root) = 32),
  previous_head bytea not null check (length(previous_head) = 32),
  head bytea not null unique check (length(head) = 32),
  check (last_id >= first_id)
);
select stamp_times('history_seals', 'sealed_at');
select forbid_change('history_seals');
select grant_to_app('select, insert', 'history_seals');

-- ---------------------------------------------------------------- mail

-- One row for each message that should leave the house; the key says which event asked for it, once.
create table mail_messages (
  id bigint generated always as identity primary key,
  key text not null unique,
  message_id text not null unique,
  recipient text not null,
  subject text not null,
  body_text text not null,
  body_html text,
  attachments jsonb not null default '[]',
  about_kind text,
  about_id bigint,
  client_id bigint,
  state text not null default 'waiting' check (state in ('waiting', 'sending', 'sent', 'failed')),
  attempts int not null default 0,
  last_error text,
  created_at timestamptz not null default weirlight_now(),
  next_attempt_at timestamptz not null default weirlight_now(),
  claimed_at timestamptz,
  sent_at timestamptz,
  failed_at timestamptz
);
-- the sender looks for what is due, the page for what has not left
create index mail_messages_due on mail_messages (next_attempt_at) where state in ('waiting', 'sending');
create index mail_messages_failed on mail_messages (id desc) where state = 'failed';
create index mail_messages_about on mail_messages (about_kind, about_id, id desc);
create index mail_messages_client on mail_messages (client_id, id desc) where client_id is not null;
select stamp_times('mail_messages', 'created_at', 'claimed_at', 'sent_at', 'failed_at');
select grant_to_app('select, insert, update', 'mail_messages');

-- ---------------------------------------------------------------- sessions and sign-in

create table sessions (
  sid text primary key,
  sess jsonb not null,
  expire timestamptz not null
);
create index sessions_expire on sessions (expire);
-- ending all sessions of a person who is disabled or changes the passphrase
create index sessions_user on sessions ((sess ->> 'userId'));
select grant_to_app('select, insert, update, delete', 'sessions');

create table sign_in_attempts (
  id bigint generated always as identity primary key,
  at timestamptz not null default weirlight_now(),
  -- SHA-256 of the address typed: the table holds no e-mail addresses of strangers
  account_hash text not null,
  address text not null,
  succeeded boolean not null
);
create index sign_in_attempts_account on sign_in_attempts (account_hash, at desc);
create index sign_in_attempts_address on sign_in_attempts (address, at desc);
create index sign_in_attempts_at on sign_in_attempts (at);
select grant_to_app('select, insert, delete', 'sign_in_attempts');

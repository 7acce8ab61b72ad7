-- The second factor of a sign-in: codes of a device that shows a new one every thirty seconds (RFC 6238). Since when a
-- person has one is part of the account, and so of history. The secret is not: this table is kept out of history.
alter table users add column second_factor_since timestamptz;
select stamp_times('users', 'second_factor_since');

create table second_factors (
  user_id bigint primary key references users,
  -- AES-256-GCM, with a key that the application alone has; it counts once users.second_factor_since is set
  secret bytea not null,
  -- the newest step of time that a code was taken of: no code is taken twice
  last_step int not null default 0,
  -- SHA-256 of each recovery code that was not used yet
  recovery_hashes text[] not null default '{}'
);
select grant_to_app('select, insert, update, delete', 'second_factors');

-- The record of the laboratory: people, clients, bench, samples, calibrations, batches, results, alerts, certificates.
-- Concentrations are kept in mg/L. Values typed by people are kept as typed (text) beside their numeric value.
-- Every table is watched by history; times that matter in law are stamped by the server, whatever the application sends.

create domain absorbance_text as text check (value ~ '^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d{1,3})?$' and length(value) <= 24);
create domain decimal_text as text check (value ~ '^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d{1,3})?$' and length(value) <= 24);

-- Numbers that people see: S-26-04117. One sequence a kind; the year is the server's.
create function next_number(prefix text, sequence regclass, width int) returns text
language sql volatile as $$
  select prefix || '-' || to_char(weirlight_now() at time zone 'UTC', 'YY') || '-' || lpad(nextval(sequence)::text, width, '0')
$$;

create table laboratory (
  id bigint primary key default 1 check (id = 1),
  name text not null,
  address text not null,
  accreditation text not null,
  time_zone text not null,
  email text not null,
  phone text not null,
  version int not null default 1
);

-- Programmes: named sets of limits and rules; all of it data with source, edition and date.
create table programmes (
  id bigint generated always as identity primary key,
  code text not null unique,
  name text not null,
  display_unit text not null check (display_unit in ('mg/L', 'ug/L')),
  ties text not null check (ties in ('half-up', 'half-even')),
  non_detect text not null,
  note text not null default '',
  definition jsonb not null default '{}',
  version int not null default 1
);

create table limits (
  id bigint generated always as identity primary key,
  programme_id bigint not null references programmes,
  code text, -- of the shipped catalogue; null for a limit the laboratory wrote itself
  analyte text not null check (analyte in ('Fe', 'Cu', 'Mn', 'Cr')),
  form text not null check (form in ('total', 'dissolved', 'hexavalent')),
  kind text not null,
  name text not null,
  value numeric not null check (value > 0),
  value_text decimal_text not null,
  unit text not null check (unit in ('mg/L', 'ug/L')),
  digits int not null check (digits between 1 and 6),
  decision_rule text not null check (decision_rule in ('simple', 'rounded', 'guarded', 'four-zone')),
  guard_factor numeric,
  raises_alert boolean not null default true,
  source text not null,
  edition text not null,
  mark text not null,
  valid_from date not null,
  valid_until date check (valid_until is null or valid_until > valid_from),
  definition jsonb not null default '{}', -- the catalogue's entry whole: statistic, note, place
  unique (programme_id, code) -- loading the catalogue again changes rows instead of doubling them
);
create index limits_by_programme on limits (programme_id, analyte, form); -- looked up for every determination

-- Duties and clocks that laws attach to a finding; shown, never decided here.
create table clocks (
  id bigint generated always as identity primary key,
  code text not null unique,
  jurisdiction text not null,
  duty text not null,
  who text not null default '',
  starting_event text not null check (starting_event in ('collected', 'analysed', 'released', 'received', 'notified')),
  hours numeric not null check (hours > 0),
  applies_to text not null default 'any',
  source text not null,
  edition text not null,
  mark text not null,
  definition jsonb not null default '{}'
);

create table methods (
  id bigint generated always as identity primary key,
  code text not null,
  edition text not null,
  title text not null,
  analyte text not null check (analyte in ('Fe', 'Cu', 'Mn', 'Cr')),
  form text not null check (form in ('total', 'dissolved', 'hexavalent')),
  wavelength_nm numeric not null,
  definition jsonb not null,
  active boolean not null default true,
  version int not null default 1,
  unique (code, edition)
);

create table clients (
  id bigint generated always as identity primary key,
  code text not null unique,
  name text not null,
  system_id text not null default '',
  address text not null default '',
  programme_id bigint not null references programmes,
  agency_name text not null default '',
  agency_phone text not null default '',
  active boolean not null default true,
  version int not null default 1
);

create table users (
  id bigint generated always as identity primary key,
  email text not null check (email = lower(email) and length(email) <= 254),
  name text not null,
  role text not null check (role in ('technician', 'qa-manager', 'client', 'auditor', 'administrator')),
  client_id bigint references clients check ((role = 'client') = (client_id is not null)),
  status text not null default 'invited' check (status in ('invited', 'active', 'disabled')),
  password_hash text,
  created_at timestamptz not null default weirlight_now(),
  last_signed_in_at timestamptz,
  version int not null default 1
);
create unique index users_email on users (email); -- sign-in looks people up by it

create table user_tokens (
  id bigint generated always as identity primary key,
  user_id bigint not null references users,
  kind text not null check (kind in ('invitation', 'reset')),
  token_hash text not null unique,
  expires_at timestamptz not null,
  used_at timestamptz,
  created_at timestamptz not null default weirlight_now()
);

create table authorisations (
  id bigint generated always as identity primary key,
  user_id bigint not null references users,
  method_id bigint not null references methods,
  activity text not null check (activity in ('read', 'sign-calibration', 'review')),
  valid_from date not null,
  valid_until date not null check (valid_until > valid_from),
  evidence text not null
);
create index authorisations_by_user on authorisations (user_id, method_id);

create table contacts (
  id bigint generated always as identity primary key,
  client_id bigint not null references clients,
  name text not null,
  email text not null,
  gets_alerts boolean not null,
  gets_certificates boolean not null,
  active boolean not null default true,
  version int not null default 1
);
create index contacts_by_client on contacts (client_id);

create table sampling_points (
  id bigint generated always as identity primary key,
  client_id bigint not null references clients,
  code text not null,
  name text not null,
  kind text not null check (kind in ('source', 'raw', 'treated', 'distribution', 'tap', 'waste')),
  active boolean not null default true,
  version int not null default 1,
  unique (client_id, code)
);

create sequence reagent_numbers;
create sequence standard_numbers;
create table material_lots (
  id bigint generated always as identity primary key,
  number text not null unique,
  kind text not null check (kind in ('reagent', 'stock', 'working-standard', 'control', 'second-source')),
  name text not null,
  analyte text check (analyte in ('Fe', 'Cu', 'Mn', 'Cr')),
  concentration decimal_text,
  uncertainty decimal_text,
  lot_code text not null,
  producer text not null,
  certificate_ref text not null default '',
  received_on date not null,
  opened_on date check (opened_on is null or opened_on >= received_on),
  expires_on date not null check (expires_on > received_on),
  parent_id bigint references material_lots,
  recipe text not null default '',
  storage text not null default '',
  hazards text not null default '',
  state text not null default 'in-use' check (state in ('in-use', 'used-up', 'withdrawn')),
  prepared_by bigint references users,
  prepared_at timestamptz not null default weirlight_now(),
  version int not null default 1
);
create index material_lots_by_parent on material_lots (parent_id); -- what was made from a lot

create sequence instrument_numbers;
create table instruments (
  id bigint generated always as identity primary key,
  number text not null unique,
  name text not null,
  kind text not null,
  serial text not null,
  location text not null,
  bandwidth_nm decimal_text not null,
  state text not null default 'in-use' check (state in ('in-use', 'out-of-use')),
  version int not null default 1
);

create table instrument_checks (
  id bigint generated always as identity primary key,
  instrument_id bigint not null references instruments,
  kind text not null check (kind in ('wavelength', 'photometric', 'stray-light', 'baseline')),
  reference text not null,
  nominal decimal_text not null,
  found decimal_text not null,
  tolerance decimal_text not null,
  unit text not null,
  passed boolean not null,
  checked_at timestamptz not null default weirlight_now(),
  checked_by bigint not null references users,
  next_due_on date not null,
  note text not null default ''
);
create index instrument_checks_by_instrument on instrument_checks (instrument_id, checked_at desc);

create sequence sample_numbers;
create table samples (
  id bigint generated always as identity primary key,
  number text not null unique,
  draft_id uuid unique, -- the form's own key: a form sent twice makes one sample
  client_id bigint not null references clients,
  sampling_point_id bigint not null references sampling_points,
  purpose text not null check (purpose in ('compliance', 'operational')),
  kind text not null check (kind in ('routine', 'confirmation', 'raw', 'process', 'special')),
  state text not null default 'received'
    check (state in ('expected', 'received', 'accepted', 'accepted-with-qualification', 'rejected', 'in-analysis', 'reported', 'disposed')),
  collected_at timestamptz not null,
  collected_by text not null,
  received_at timestamptz,
  received_by bigint references users,
  preservation text not null check (preservation in ('none', 'nitric-acid', 'ammonium-sulfate-buffer')),
  ph text not null default '',
  temperature_c text not null default '',
  container text not null check (container in ('plastic', 'fluoropolymer', 'glass')),
  filtered_in_field boolean not null default false,
  condition text not null default '',
  remarks text not null default '',
  acceptance_reason text not null default '',
  client_consent text not null default '',
  qualified boolean not null default false,
  upload_id bigint,
  created_at timestamptz not null default weirlight_now(),
  version int not null default 1,
  check (received_at is null or received_at >= collected_at)
);
create index samples_by_client on samples (client_id, id desc); -- the client's and the register's list
create index samples_by_point on samples (sampling_point_id, collected_at desc); -- trends
create index samples_open on samples (state) where state in ('expected', 'received'); -- Today

create table determinations (
  id bigint generated always as identity primary key,
  sample_id bigint not null references samples,
  client_id bigint not null references clients,
  method_id bigint not null references methods,
  analyte text not null check (analyte in ('Fe', 'Cu', 'Mn', 'Cr')),
  form text not null check (form in ('total', 'dissolved', 'hexavalent')),
  state text not null default 'requested'
    check (state in ('requested', 'in-batch', 'measured', 'reviewed', 'released', 'withdrawn')),
  holding_due_at timestamptz not null,
  holding_rule text not null,
  withdrawn_reason text not null default '',
  version int not null default 1,
  unique (sample_id, method_id)
);
create index determinations_waiting on determinations (method_id, holding_due_at) where state = 'requested'; -- the bench's list

create sequence calibration_numbers;
create table calibrations (
  id bigint generated always as identity primary key,
  number text not null unique,
  draft_id uuid unique,
  method_id bigint not null references methods,
  instrument_id bigint not null references instruments,
  cell_path_cm decimal_text not null,
  model text not null check (model in ('linear', 'linear-through-origin', 'quadratic')),
  weighting text not null check (weighting in ('none', 'inverse-concentration', 'inverse-concentration-squared')),
  state text not null default 'draft'
    check (state in ('draft', 'submitted', 'in-force', 'expired', 'invalidated', 'replaced', 'rejected')),
  stock_lot_id bigint references material_lots,
  colour_started_at timestamptz,
  temperature_c text not null default '',
  note text not null default '',
  stored jsonb, -- the fit as computed at submission: engine version, coefficients, covariance, read-back
  criteria jsonb not null default '[]',
  prepared_by bigint not null references users,
  created_at timestamptz not null default weirlight_now(),
  submitted_at timestamptz,
  signed_by bigint references users,
  signed_at timestamptz,
  valid_until timestamptz,
  justification text not null default '', -- why it was signed although a criterion failed
  returned_by bigint references users,
  returned_reason text not null default '',
  ended_at timestamptz,
  ended_reason text not null default '', -- why it was taken out of force
  replaced_by bigint references calibrations,
  copied_from bigint references calibrations,
  version int not null default 1,
  check (signed_by is null or signed_by <> prepared_by)
);
-- one calibration in force for a method on an instrument and cell
create unique index calibrations_in_force on calibrations (method_id, instrument_id, cell_path_cm) where state = 'in-force';
create index calibrations_by_method on calibrations (method_id, id desc);

create table calibration_lots (
  calibration_id bigint not null references calibrations,
  lot_id bigint not null references material_lots,
  primary key (calibration_id, lot_id)
);
create table calibration_standards (
  id bigint generated always as identity primary key,
  calibration_id bigint not null references calibrations,
  position int not null,
  role text not null check (role in ('standard', 'second-source')),
  concentration decimal_text not null,
  lot_id bigint references material_lots,
  left_out_reason text not null default '',
  removed boolean not null default false
);
create index calibration_standards_by_calibration on calibration_standards (calibration_id, position);

-- Readings are never changed: a corrected one is a new row that supersedes the old with a reason.
create table calibration_readings (
  id bigint generated always as identity primary key,
  calibration_id bigint not null references calibrations,
  standard_id bigint not null references calibration_standards,
  replicate int not null check (replicate between 1 and 5),
  absorbance_text absorbance_text, -- null: the earlier reading was withdrawn
  absorbance numeric,
  read_at timestamptz not null default weirlight_now(),
  read_by bigint not null references users,
  supersedes_id bigint unique references calibration_readings,
  reason text not null default '',
  check (supersedes_id is null or reason <> '')
);
create index calibration_readings_by_calibration on calibration_readings (calibration_id);

create table uploads (
  id bigint generated always as identity primary key,
  kind text not null check (kind in ('manifest', 'readings')),
  about_id bigint,
  file_name text not null,
  sha256 text not null,
  bytes bytea not null,
  preview jsonb not null,
  uploaded_by bigint not null references users,
  uploaded_at timestamptz not null default weirlight_now(),
  applied_at timestamptz
);

create sequence batch_numbers;
create table batches (
  id bigint generated always as identity primary key,
  number text not null unique,
  draft_id uuid unique,
  method_id bigint not null references methods,
  calibration_id bigint not null references calibrations,
  instrument_id bigint not null references instruments,
  state text not null default 'open' check (state in ('open', 'submitted', 'reviewed', 'released', 'returned')),
  replicates int not null check (replicates between 1 and 5),
  colour_started_at timestamptz,
  note text not null default '',
  rules jsonb not null, -- the rules the readings are judged by, frozen when the batch was opened
  opened_by bigint not null references users,
  opened_at timestamptz not null default weirlight_now(),
  submitted_by bigint references users,
  submitted_at timestamptz,
  reviewed_by bigint references users,
  reviewed_at timestamptz,
  released_by bigint references users,
  released_at timestamptz,
  returned_by bigint references users,
  returned_reason text not null default '',
  review_comment text not null default '',
  -- what the run sheet came to when it was last changed: lists read these instead of computing every batch
  positions_read int not null default 0,
  above_limit int not null default 0,
  open_findings int not null default 0,
  version int not null default 1,
  check (released_by is null or released_by <> submitted_by)
);
create index batches_by_state on batches (state, id desc);
create index batches_by_calibration on batches (calibration_id);
create table batch_lots (
  batch_id bigint not null references batches,
  lot_id bigint not null references material_lots,
  primary key (batch_id, lot_id)
);

create table positions (
  id bigint generated always as identity primary key,
  batch_id bigint not null references batches,
  position int not null,
  kind text not null check (kind in ('blank', 'verification', 'method-blank', 'control', 'sample', 'duplicate', 'spike')),
  determination_id bigint references determinations,
  of_position_id bigint references positions,
  expected decimal_text,
  added decimal_text,
  lot_id bigint references material_lots,
  dilution decimal_text not null default '1',
  note text not null default '',
  limits jsonb not null default '[]', -- the client's limits and reporting rules, frozen when the batch was opened
  reporting jsonb not null default '{}',
  version int not null default 1,
  unique (batch_id, position),
  check ((kind = 'sample') = (determination_id is not null and of_position_id is null) or kind in ('duplicate', 'spike')),
  check (kind not in ('duplicate', 'spike') or of_position_id is not null)
);
create index positions_by_determination on positions (determination_id);

create table position_readings (
  id bigint generated always as identity primary key,
  batch_id bigint not null references batches,
  position_id bigint not null references positions,
  replicate int not null check (replicate between 1 and 5),
  absorbance_text absorbance_text not null,
  absorbance numeric not null,
  read_at timestamptz not null default weirlight_now(),
  read_by bigint not null references users,
  source text not null check (source in ('typed', 'pasted', 'file')),
  upload_id bigint references uploads,
  supersedes_id bigint unique references position_readings,
  reason text not null default '',
  check (supersedes_id is null or reason <> '')
);
create index position_readings_by_batch on position_readings (batch_id);
-- the first reading of a cell can be written once; every later one names the one it supersedes
create unique index position_readings_first on position_readings (position_id, replicate) where supersedes_id is null;
create unique index calibration_readings_first on calibration_readings (standard_id, replicate) where supersedes_id is null;

create table finding_actions (
  id bigint generated always as identity primary key,
  batch_id bigint not null references batches,
  finding_id text not null,
  kind text not null check (kind in ('read-again', 'flagged', 'explained', 'rerun')),
  text text not null,
  by_id bigint not null references users,
  at timestamptz not null default weirlight_now()
);
create index finding_actions_by_batch on finding_actions (batch_id);

create table results (
  id bigint generated always as identity primary key,
  client_id bigint not null references clients,
  sample_id bigint not null references samples,
  determination_id bigint not null references determinations,
  batch_id bigint not null references batches,
  position_id bigint not null unique references positions,
  calibration_id bigint not null references calibrations,
  method_id bigint not null references methods,
  sampling_point_id bigint not null references sampling_points,
  analyte text not null,
  form text not null,
  collected_at timestamptz not null,
  state text not null default 'measured' check (state in ('measured', 'reviewed', 'released', 'not-reported')),
  concentration double precision not null, -- mg/L, unrounded, as computed
  standard_error double precision not null,
  expanded_uncertainty double precision not null,
  reported_text text not null,
  numeric_for_compliance double precision,
  unit text not null check (unit in ('mg/L', 'ug/L')),
  uncertainty_text text not null default '',
  limit_id bigint references limits,
  limit_snapshot jsonb,
  verdict text check (verdict in ('below', 'above', 'conditional-below', 'conditional-above')),
  explanation text not null default '',
  flags text[] not null default '{}',
  inputs jsonb not null, -- everything the engine was given: readings by id, dilution, rules
  engine_version text not null,
  measured_at timestamptz not null default weirlight_now(),
  reviewed_by bigint references users,
  reviewed_at timestamptz,
  released_by bigint references users,
  released_at timestamptz,
  version int not null default 1
);
create index results_by_sample on results (sample_id);
create index results_by_determination on results (determination_id);
create index results_by_batch on results (batch_id);
create index results_by_client on results (client_id, id desc);
create index results_trend on results (sampling_point_id, analyte, collected_at) where state = 'released';
-- a determination has one released result at most
create unique index results_one_released on results (determination_id) where state = 'released';

create sequence alert_numbers;
create table alerts (
  id bigint generated always as identity primary key,
  number text not null unique,
  client_id bigint not null references clients,
  result_id bigint not null unique references results, -- one alert a result, however often release is tried
  state text not null default 'raised' check (state in ('raised', 'notified', 'acknowledged', 'closed', 'cancelled')),
  raised_at timestamptz not null default weirlight_now(),
  notified_at timestamptz,
  answer_due_at timestamptz,
  acknowledged_by bigint references users,
  acknowledged_at timestamptz,
  acknowledgement text not null default '',
  closed_by bigint references users,
  closed_at timestamptz,
  closing_note text not null default '',
  version int not null default 1
);
create index alerts_by_client on alerts (client_id, id desc);
create index alerts_open on alerts (state) where state in ('raised', 'notified');

create sequence certificate_numbers;
create table certificates (
  id bigint generated always as identity primary key,
  number text not null unique,
  client_id bigint not null references clients,
  sample_id bigint not null references samples,
  state text not null default 'issued' check (state in ('issued', 'superseded', 'withdrawn')),
  snapshot jsonb not null,
  verification_code text not null unique,
  amends_id bigint unique references certificates,
  amendment int not null default 0,
  reason text not null default '',
  issued_by bigint not null references users,
  issued_at timestamptz not null default weirlight_now(),
  withdrawn_reason text not null default '',
  version int not null default 1
);
create index certificates_by_client on certificates (client_id, id desc);
create index certificates_by_sample on certificates (sample_id);
-- a sample has one current certificate
create unique index certificates_current on certificates (sample_id) where state = 'issued';

create table certificate_results (
  certificate_id bigint not null references certificates,
  result_id bigint not null references results,
  primary key (certificate_id, result_id)
);
create index certificate_results_by_result on certificate_results (result_id);
create table certificate_documents (
  certificate_id bigint primary key references certificates,
  pdf bytea not null,
  sha256 text not null,
  rendered_at timestamptz not null default weirlight_now()
);
create table certificate_openings (
  id bigint generated always as identity primary key,
  certificate_id bigint not null references certificates,
  user_id bigint not null references users,
  at timestamptz not null default weirlight_now()
);
create index certificate_openings_by_certificate on certificate_openings (certificate_id);

-- A signature covers a hash of exactly what was on the screen; when that changes, it no longer stands.
create table signatures (
  id bigint generated always as identity primary key,
  thing text not null check (thing in ('calibrations', 'batches', 'certificates')),
  thing_id bigint not null,
  meaning text not null check (meaning in ('prepared', 'reviewed', 'accepted for use', 'released', 'amended')),
  user_id bigint not null references users,
  printed_name text not null,
  role text not null,
  at timestamptz not null default weirlight_now(),
  content jsonb not null,
  content_sha256 text not null
);
create index signatures_by_thing on signatures (thing, thing_id);

create table validation_runs (
  id bigint generated always as identity primary key,
  at timestamptz not null default weirlight_now(),
  by_id bigint not null references users,
  engine_version text not null,
  cases int not null,
  passed int not null,
  failed int not null,
  report jsonb not null,
  sha256 text not null,
  pdf bytea
);

-- who has which batch open; nothing regulated, so not in history
create table batch_watchers (
  batch_id bigint not null references batches,
  user_id bigint not null references users,
  seen_at timestamptz not null default weirlight_now(),
  primary key (batch_id, user_id)
);

do $$
declare watched text;
begin
  foreach watched in array array[
    'laboratory', 'programmes', 'limits', 'clocks', 'methods', 'clients', 'users', 'authorisations', 'contacts',
    'sampling_points', 'material_lots', 'instruments', 'instrument_checks', 'samples', 'determinations', 'calibrations',
    'calibration_standards', 'calibration_readings', 'batches', 'positions', 'position_readings', 'finding_actions',
    'results', 'alerts', 'certificates', 'certificate_openings', 'signatures'
  ] loop
    perform watch_history(watched::regclass);
  end loop;
  perform watch_history('calibration_lots', 'calibration_id');
  perform watch_history('batch_lots', 'batch_id');

  foreach watched in array array[
    'laboratory', 'clients', 'users', 'user_tokens', 'contacts', 'sampling_points', 'material_lots', 'instruments', 'samples',
    'determinations', 'calibrations', 'batches', 'positions', 'results', 'alerts', 'uploads', 'batch_watchers', 'methods'
  ] loop
    perform grant_to_app('select, insert, update', watched::regclass);
  end loop;
  -- standards of a draft may be reworded; readings, actions, documents and signatures are only ever added
  perform grant_to_app('select, insert, update', 'calibration_standards');
  perform grant_to_app('select, insert, delete', 'calibration_lots');
  foreach watched in array array[
    'programmes', 'limits', 'clocks', 'authorisations', 'batch_lots', 'instrument_checks', 'calibration_readings', 'position_readings',
    'finding_actions', 'signatures', 'certificate_results', 'certificate_documents', 'certificate_openings', 'validation_runs'
  ] loop
    perform grant_to_app('select, insert', watched::regclass);
  end loop;
  -- of an issued certificate only its state may move
  perform grant_to_app('select, insert, update (state, version, withdrawn_reason)', 'certificates');
  perform grant_to_app('update (pdf)', 'validation_runs');
end
$$;

select forbid_change('calibration_readings');
select forbid_change('position_readings');
select forbid_change('finding_actions');
select forbid_change('instrument_checks');
select forbid_change('signatures');
select forbid_change('certificate_documents');
select forbid_change('certificate_results');
select forbid_change('certificates', 'state', 'version', 'withdrawn_reason');

-- the server's time, whatever the application sends
select stamp_times('samples', 'created_at');
select stamp_times('calibrations', 'created_at', 'submitted_at', 'signed_at', 'ended_at');
select stamp_times('calibration_readings', 'read_at');
select stamp_times('batches', 'opened_at', 'submitted_at', 'reviewed_at', 'released_at');
select stamp_times('position_readings', 'read_at');
select stamp_times('finding_actions', 'at');
select stamp_times('instrument_checks', 'checked_at');
select stamp_times('results', 'measured_at', 'reviewed_at', 'released_at');
select stamp_times('alerts', 'raised_at', 'notified_at', 'acknowledged_at', 'closed_at');
select stamp_times('signatures', 'at');
select stamp_times('certificates', 'issued_at');
select stamp_times('certificate_documents', 'rendered_at');
select stamp_times('certificate_openings', 'at');
select stamp_times('validation_runs', 'at');
select stamp_times('uploads', 'uploaded_at', 'applied_at');

-- the application draws numbers; it never sets a sequence
select grant_to_app('usage', seq) from unnest(array['reagent_numbers', 'standard_numbers', 'instrument_numbers', 'sample_numbers',
  'calibration_numbers', 'batch_numbers', 'alert_numbers', 'certificate_numbers']::regclass[]) seq;

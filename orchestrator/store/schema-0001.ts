/** First tables: campaigns, runs, attempts, legs and the index of histories. JSON is kept as text, so that key order and every digit survive. */
export const SCHEMA_0001 = `
create table midwatch.campaigns (
  campaign text primary key,
  title text not null,
  plan text not null,
  standing text not null check (standing in ('ready', 'running', 'paused', 'stopped', 'done')),
  created_ms float8 not null,
  deadline_ms float8
);

create table midwatch.runs (
  run_id text primary key,
  solver text not null,
  model_version text not null,
  inputs text not null,
  created_ms float8 not null
);

-- One try at a run with given numerical settings, whichever campaign asked for it. \`fence\` counts claims: whoever
-- claimed last may write, nobody else.
create table midwatch.attempts (
  run_id text not null references midwatch.runs,
  attempt int not null check (attempt >= 1),
  settings text not null,
  inputs text not null,
  fence int not null default 0,
  legs int not null default 0,
  steps int not null default 0,
  seconds float8 not null default 0,
  checkpoint text,
  ended_because text,
  output text not null default '[]',
  channels text not null default '[]',
  periods text not null default '[]',
  dt_seconds float8 not null default 0,
  primary key (run_id, attempt),
  unique (run_id, settings)
);

create table midwatch.histories (
  run_id text not null,
  attempt int not null,
  from_step int not null,
  to_step int not null check (to_step >= from_step),
  file text not null unique,
  bytes float8 not null,
  primary key (run_id, attempt, from_step),
  foreign key (run_id, attempt) references midwatch.attempts
);

create table midwatch.legs (
  run_id text not null,
  attempt int not null,
  fence int not null,
  campaign text not null,
  from_step int not null,
  to_step int not null,
  seconds float8 not null,
  outcome text not null,
  committed_ms float8 not null,
  primary key (run_id, attempt, fence),
  foreign key (run_id, attempt) references midwatch.attempts
);

-- A run as one campaign sees it: verdicts belong here, since campaigns differ in what they accept.
create table midwatch.campaign_runs (
  campaign text not null references midwatch.campaigns on delete cascade,
  run_id text not null references midwatch.runs,
  number int not null,
  place int not null,
  role text not null,
  label text not null,
  planned text not null,
  rules text not null,
  state text not null default 'waiting' check (state in ('waiting', 'running', 'done')),
  attempt int not null,
  remedy text,
  legs int not null default 0,
  deaths int not null default 0,
  judged_steps int not null default 0,
  steps int not null default 0,
  longest_steps int not null,
  seconds float8 not null default 0,
  verdict text,
  judgement text,
  reason text,
  stop_cause text,
  primary key (campaign, run_id),
  foreign key (run_id, attempt) references midwatch.attempts
);
create index campaign_runs_by_run on midwatch.campaign_runs (run_id);

-- What a campaign made of an attempt before it went on to the next.
create table midwatch.past_attempts (
  campaign text not null,
  run_id text not null,
  attempt int not null,
  remedy text,
  verdict text not null,
  reason text not null,
  steps int not null,
  judgement text,
  primary key (campaign, run_id, attempt),
  foreign key (campaign, run_id) references midwatch.campaign_runs on delete cascade
);
`;

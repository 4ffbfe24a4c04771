-- What the runtime role may do. Runs after every migration, as the owner; may run again and again.
-- The runtime role owns nothing, so it can neither change a table nor switch a trigger off.
begin;

grant usage on schema public to twinpass_app;
revoke all on all tables in schema public from twinpass_app;
grant select, insert, update, delete on all tables in schema public to twinpass_app;
grant usage, select on all sequences in schema public to twinpass_app;

-- Append-only: what is recorded here is never changed and never removed.
revoke update, delete on ledger, decisions, waivers, vehicle_sheets, gate_plans, channel_keys,
  calibration_settings, second_agreements from twinpass_app;
revoke delete on descriptions from twinpass_app;

-- Readiness compares the migration that the code expects with the one that the database has.
grant usage on schema drizzle to twinpass_app;
grant select on all tables in schema drizzle to twinpass_app;

-- Job queue: rows yes, tables no. A queue is a table of its own, made by a function that runs as the owner.
grant usage on schema pgboss to twinpass_app;
grant select, insert, update, delete on all tables in schema pgboss to twinpass_app;
alter default privileges in schema pgboss grant select, insert, update, delete on tables to twinpass_app;
alter function pgboss.create_queue(text, json) security definer;
alter function pgboss.create_queue(text, json) set search_path = pg_catalog, pg_temp;
revoke all on function pgboss.create_queue(text, json) from public;
revoke all on function pgboss.delete_queue(text) from public;
grant execute on function pgboss.create_queue(text, json) to twinpass_app;

commit;

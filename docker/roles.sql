-- The application's roles and its database, for a PostgreSQL 15 or newer that someone else runs. Roles belong to the whole
-- server, so no migration makes them. Run once as a superuser, with one password for all logins:
--   psql -v password="$TRUNNION_DATABASE_PASSWORD" -f roles.sql
-- or give each login its own afterwards (alter role … password …) and set DATABASE_URL_OWNER, _LAB, _CLIENT, _AUTH, _QUEUE.

\set ON_ERROR_STOP on
set client_min_messages = warning;

select format('create role %I', name)
from unnest(array['trunnion_owner', 'trunnion_lab', 'trunnion_client', 'trunnion_auth', 'trunnion_queue', 'trunnion_taken']) as name
where not exists (select from pg_roles where rolname = name)
\gexec

alter role trunnion_owner login noinherit nosuperuser nocreatedb nocreaterole noreplication nobypassrls password :'password';
alter role trunnion_lab login inherit nosuperuser nocreatedb nocreaterole noreplication nobypassrls password :'password';
alter role trunnion_client login inherit nosuperuser nocreatedb nocreaterole noreplication nobypassrls password :'password';
alter role trunnion_auth login inherit nosuperuser nocreatedb nocreaterole noreplication nobypassrls password :'password';
alter role trunnion_queue login inherit nosuperuser nocreatedb nocreaterole noreplication nobypassrls password :'password';
alter role trunnion_taken nologin nosuperuser nocreatedb nocreaterole noreplication nobypassrls;

-- The owner acts as these two by SET ROLE only, to hand a function or a schema over to them.
grant trunnion_taken, trunnion_queue to trunnion_owner;

select 'create database trunnion owner trunnion_owner template template0 encoding ''UTF8'' locale ''C.UTF-8'''
where not exists (select from pg_database where datname = 'trunnion')
\gexec

alter database trunnion owner to trunnion_owner;
revoke all on database trunnion from public;
grant connect on database trunnion to trunnion_lab, trunnion_client, trunnion_auth, trunnion_queue;
grant create on database trunnion to trunnion_queue;

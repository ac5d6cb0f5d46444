#!/bin/sh
# Makes the roles and the database once, when the database's volume is new. Passwords come from the environment.
set -eu
psql -v ON_ERROR_STOP=1 --username "$POSTGRES_USER" --dbname postgres \
  -v owner="$APP_OWNER_PASSWORD" -v web="$APP_WEB_PASSWORD" -v worker="$APP_WORKER_PASSWORD" <<'SQL'
create role app_owner login nosuperuser nocreatedb nocreaterole nobypassrls password :'owner';
create role app_web login nosuperuser nocreatedb nocreaterole nobypassrls password :'web';
create role app_worker login nosuperuser nocreatedb nocreaterole nobypassrls password :'worker';
create role app_cross nologin nosuperuser nobypassrls;
grant app_cross to app_owner;
create database strikeboard owner app_owner template template0 encoding 'UTF8' locale 'C.UTF-8';
revoke all on database strikeboard from public;
grant connect on database strikeboard to app_web, app_worker;
SQL

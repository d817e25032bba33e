#!/bin/sh
# Run by the database's image once, when its data folder is empty.
set -eu
psql -U postgres -v password="$TRUNNION_DATABASE_PASSWORD" -f /roles.sql

#!/usr/bin/env bash
# Runs the store's tests against a PostgreSQL server of their own: installs
# Debian's package if there is none, starts it in a temporary folder on the
# loopback address, and stops it again. Arguments go to go test.
#
#   screen/store/testdata/postgres.sh [-race] [-run NAME]
set -euo pipefail
cd "$(dirname "$0")/.."
go=${GO:-go}

newest() { ls -d /usr/lib/postgresql/*/bin 2>/dev/null | sort -V | tail -n 1; }
if [ -z "$(newest)" ]; then
  sudo=""
  [ "$(id -u)" -eq 0 ] || sudo=sudo
  $sudo apt-get update -qq
  $sudo apt-get install -y -qq --no-install-recommends postgresql
fi
bin=$(newest)

folder=$(mktemp -d)
as=""
if [ "$(id -u)" -eq 0 ]; then # the server refuses to run as root
  chown postgres "$folder"
  as="runuser -u postgres --"
fi
stop() {
  (cd / && $as "$bin/pg_ctl" -D "$folder/data" -m immediate stop >/dev/null) || true
  rm -rf "$folder"
}
trap stop EXIT

port=$((20000 + RANDOM % 20000))
(
  cd /
  $as "$bin/initdb" -D "$folder/data" -U torsieve --auth=trust --encoding=UTF8 --no-sync >/dev/null
  $as "$bin/pg_ctl" -D "$folder/data" -l "$folder/log" -w start \
    -o "-p $port -c listen_addresses=127.0.0.1 -c unix_socket_directories=$folder" >/dev/null
)
"$bin/postgres" --version
TORSIEVE_TEST_POSTGRES="postgres://torsieve@127.0.0.1:$port/postgres?sslmode=disable" "$go" test -count=1 "$@" .

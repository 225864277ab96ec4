#!/bin/sh
# Installs what is missing of tests/packages.txt. Usage: sh tests/setup.sh KIND...
# KIND: build, test or full. Does nothing, quickly, where all is there.
set -eu
here=$(CDPATH='' cd -- "$(dirname -- "$0")" && pwd)

missing=
for kind in "$@"; do
  for package in $(sed -n "s/^$kind //p" "$here/packages.txt"); do
    status=$(dpkg-query -W -f='${Status}' "$package" 2>/dev/null || true)
    [ "$status" = 'install ok installed' ] || missing="$missing $package"
  done
done
[ -n "$missing" ] || exit 0

if ! command -v apt-get >/dev/null 2>&1; then
  echo "setup: this is no Debian; install the equivalents of:$missing (see README, other systems)" >&2
  exit 1
fi
if [ "$(id -u)" = 0 ]; then
  as_root=
elif command -v sudo >/dev/null 2>&1; then
  as_root=sudo
else
  echo "setup: neither root nor sudo; as root, run: apt-get install --no-install-recommends$missing" >&2
  exit 1
fi
echo "setup: installing$missing" >&2
export DEBIAN_FRONTEND=noninteractive
$as_root apt-get -o DPkg::Lock::Timeout=300 -qq update
# shellcheck disable=SC2086
$as_root apt-get -o DPkg::Lock::Timeout=300 -qq install -y --no-install-recommends $missing >&2

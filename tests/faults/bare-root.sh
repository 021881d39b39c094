#!/usr/bin/env bash
# The two commands in a bare Debian 12: a root of essential packages with only Node, git and certificates added, and a clone.
# Usage, as root: tests/faults/bare-root.sh [--working-tree]; with the option the files as they are, not the last commit.
# Needs mmdebstrap. Prints the last lines of both commands, their times, and what they left running.
set -euo pipefail

repository=$(cd "$(dirname "$0")/../.." && pwd)
# Mounts live in a namespace of their own: they are gone when the last process here is, however it ends.
if [ -z "${BARE_ROOT_NAMESPACE:-}" ]; then
  [ "$(id -u)" = 0 ] || { echo "run this as root" >&2; exit 2; }
  command -v mmdebstrap >/dev/null || { echo "mmdebstrap is not installed" >&2; exit 2; }
  BARE_ROOT_NAMESPACE=1 exec unshare --mount --propagation private bash "$0" "$@"
fi

root=$(mktemp -d "${TMPDIR:-/tmp}/bare-root.XXXXXX")
logs=$repository/tests/output
failures=0
mkdir -p "$logs"

say() { echo "[bare root] $*"; }
seconds_since() { echo "$(($(date +%s) - $1)) s"; }

# Processes whose root folder is the bare root: all that was started there, and nothing else.
processes_inside() {
  local entry
  for entry in /proc/[0-9]*; do
    if [ "$(readlink "$entry/root" 2>/dev/null)" = "$root" ]; then echo "${entry#/proc/}"; fi
  done
}

clean_up() {
  local pid
  trap '' INT TERM HUP
  for pid in $(processes_inside); do kill -KILL "$pid" 2>/dev/null || true; done
  sleep 0.5
  umount -R "$root/proc" "$root/dev" "$root/sys" 2>/dev/null || true
  # Never remove through a mount that is still there: it would empty the machine's own /dev.
  if grep -q " $root/" /proc/self/mounts; then say "still mounted, left in place: $root"; else rm -rf "$root"; fi
}
trap clean_up EXIT
trap 'exit 130' INT
trap 'exit 143' TERM HUP

make_root() {
  say "making a bare Debian 12 in $root"
  # Debian's own sources of this machine, in either form; without any, mmdebstrap's default.
  local sources=() file
  for file in /etc/apt/sources.list /etc/apt/sources.list.d/debian.sources; do
    if grep -qs debian "$file"; then sources+=("$file"); fi
  done
  # How this machine reaches them: proxies and certificates, nothing else of its apt settings.
  local options=()
  while read -r option; do options+=("--aptopt=$option"); done < <(apt-config dump | grep -E '^Acquire::https?::' || true)
  mmdebstrap --quiet --mode=root --variant=minbase --include=ca-certificates,git "${options[@]}" \
    bookworm "$root" "${sources[@]}"
  cp /etc/resolv.conf /etc/hosts "$root/etc/"
  cp /etc/ssl/certs/ca-certificates.crt "$root/etc/ssl/certs/ca-certificates.crt"
  mount -t proc proc "$root/proc"
  mount --rbind /dev "$root/dev"
  mount --rbind --make-rslave /sys "$root/sys"
}

add_node() {
  local prefix
  prefix=$(dirname "$(dirname "$(readlink -f "$(command -v node)")")")
  cp "$prefix/bin/node" "$root/usr/bin/node"
  mkdir -p "$root/usr/lib/node_modules" "$root/usr/etc"
  cp -r "$prefix/lib/node_modules/npm" "$root/usr/lib/node_modules/npm"
  ln -s ../lib/node_modules/npm/bin/npm-cli.js "$root/usr/bin/npm"
  ln -s ../lib/node_modules/npm/bin/npx-cli.js "$root/usr/bin/npx"
  # Where packages come from on this machine, without any credentials.
  local npmrc=$root/usr/etc/npmrc cafile
  (cd / && echo "registry=$(npm config get registry)") >"$npmrc"
  cafile=$(cd / && npm config get cafile)
  if [ -f "$cafile" ]; then echo "cafile=/etc/ssl/certs/ca-certificates.crt" >>"$npmrc"; fi
}

add_clone() {
  if [ "${1:-}" = --working-tree ]; then
    mkdir "$root/root/tenderband"
    git -C "$repository" ls-files -z --cached --others --exclude-standard |
      tar -C "$repository" --null --ignore-failed-read -T - -cf - | tar -C "$root/root/tenderband" --no-same-owner -xf -
  else
    git clone --quiet --no-hardlinks "$repository" "$root/root/tenderband"
  fi
}

# Runs a command in the clone, with nothing of this machine's environment but the way to the network.
inside() {
  local passed=() name
  for name in http_proxy https_proxy no_proxy HTTP_PROXY HTTPS_PROXY NO_PROXY NODE_EXTRA_CA_CERTS; do
    if [ -n "${!name:-}" ]; then passed+=("$name=${!name}"); fi
  done
  exec chroot "$root" /usr/bin/env -i HOME=/root PATH=/usr/local/sbin:/usr/local/bin:/usr/sbin:/usr/bin:/sbin:/bin \
    LANG=C.UTF-8 "${passed[@]}" PORT="$port" sh -c "cd /root/tenderband && exec $1"
}

free_port() {
  node -e 'const s = require("net").createServer().listen(0, "127.0.0.1", () => { console.log(s.address().port); s.close(); })'
}

fault() {
  say "FAULT: $*"
  failures=$((failures + 1))
}

expect_nothing_left() {
  local left
  sleep 1
  left=$(processes_inside)
  if [ -z "$left" ]; then say "nothing was left running"; return; fi
  # shellcheck disable=SC2086 # a list of numbers
  fault "left running by $1: $(ps -o pid=,args= -p $left)"
}

# Starts the product, waits for an answer, ends it as Ctrl-C does.
try_start() {
  local log=$logs/bare-root-start.log began pid answer=""
  began=$(date +%s)
  (inside "setsid npm start") >"$log" 2>&1 &
  pid=$!
  while kill -0 "$pid" 2>/dev/null && [ "$(($(date +%s) - began))" -lt 900 ]; do
    if answer=$(curl -sf --noproxy '*' "http://127.0.0.1:$port/health"); then break; fi
    sleep 0.5
  done
  if [ -n "$answer" ]; then
    say "$1: answers after $(seconds_since "$began")"
    sleep 2 # what it prints after its first answer
  else
    fault "$1: no answer after $(seconds_since "$began")"
  fi
  began=$(date +%s)
  kill -INT -- "-$pid" 2>/dev/null || true
  if wait "$pid"; then say "$1: ended with 0 after $(seconds_since "$began")"; else fault "$1: ended with $?"; fi
  tail -n 20 "$log"
  expect_nothing_left "npm start"
}

try_test() {
  local log=$logs/bare-root-test.log began
  began=$(date +%s)
  (inside "npm test") >"$log" 2>&1 & # in the background, so that a signal to this script is heard meanwhile
  if wait "$!"; then
    say "npm test: green after $(seconds_since "$began")"
  else
    fault "npm test: red after $(seconds_since "$began")"
  fi
  tail -n 30 "$log"
  expect_nothing_left "npm test"
}

main() {
  local began
  began=$(date +%s)
  make_root
  add_node
  add_clone "$@"
  say "root and clone made after $(seconds_since "$began")"
  port=$(free_port)
  try_start "first npm start"
  try_start "second npm start"
  try_test
  say "$failures faults"
  [ "$failures" = 0 ]
}

main "$@"

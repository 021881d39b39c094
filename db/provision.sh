# Installs what is missing before any package is there: npm's packages and Debian's. Usage: sh db/provision.sh start|test
set -eu
cd "$(dirname "$0")/.."

purpose=${1:-start}
state=.tenderband
lock=$state/provision.lock
stamp=$state/npm-installed

# Debian's names. The server core alone: the full server package would start a service of the system.
packages=""
if [ "$purpose" = test ] || [ -z "${DATABASE_URL:-}" ]; then packages="mariadb-server-core mariadb-client"; fi
if [ "$purpose" = test ]; then packages="$packages chromium python3-scikit-rf python3-scipy ngspice"; fi

say() { echo "[provision] $*"; }
fail() {
  echo "[provision] $*" >&2
  exit 1
}

check_node() {
  command -v node >/dev/null 2>&1 || fail "Node 20.19 or newer is needed; no program named node was found."
  node -e 'const [major, minor] = process.versions.node.split(".").map(Number);
    process.exit(major > 20 || (major === 20 && minor >= 19) ? 0 : 1)' ||
    fail "Node 20.19 or newer is needed; this is $(node --version)."
  command -v npm >/dev/null 2>&1 || fail "npm is needed beside node; no program named npm was found."
}

# True if a program is there, also where an ordinary user's path does not lead.
found() { PATH="$PATH:/usr/sbin:/usr/local/sbin" command -v "$1" >/dev/null 2>&1; }

# True if what a package brings is there, from Debian or elsewhere. A package that a killed run left half-installed is not.
present() {
  status=""
  if found dpkg-query; then status=$(dpkg-query -W -f='${db:Status-Status}' "$1" 2>/dev/null) || status=""; fi
  case $status in
    installed) return 0 ;;
    "" | not-installed | config-files) ;;
    *) return 1 ;;
  esac
  case $1 in
    mariadb-server-core) found mariadbd && found mariadb-install-db ;;
    mariadb-client) found mariadb && found mariadb-dump ;;
    chromium) found chromium ;;
    ngspice) found ngspice ;;
    python3-scikit-rf) ! found dpkg-query && python3 -c "import skrf" 2>/dev/null ;;
    python3-scipy) ! found dpkg-query && python3 -c "import scipy" 2>/dev/null ;;
    *) return 1 ;;
  esac
}

missing_packages() {
  missing=""
  for package in $packages; do present "$package" || missing="$missing $package"; done
  echo "${missing# }"
}

# What node_modules must have been made from: the lock file, and the Node its compiled parts fit.
wanted_stamp() {
  node -e 'const { createHash } = require("node:crypto"); const { readFileSync } = require("node:fs");
    const hash = createHash("sha256").update(readFileSync("package-lock.json")).digest("hex");
    console.log([hash, process.versions.modules, process.platform, process.arch].join(" "))'
}

npm_is_current() { [ -d node_modules ] && [ "$(cat "$stamp" 2>/dev/null)" = "$(wanted_stamp)" ]; }

# True if the process lives and is a run of this script: after a crash its number may belong to another program.
is_provisioning() {
  [ -n "$1" ] && kill -0 "$1" 2>/dev/null || return 1
  [ ! -r "/proc/$1/cmdline" ] || tr '\0' ' ' <"/proc/$1/cmdline" | grep -q provision
}

take_lock() {
  told=""
  mkdir -p "$state"
  until mkdir "$lock" 2>/dev/null; do
    holder=$(cat "$lock/pid" 2>/dev/null) || holder=""
    if is_provisioning "$holder"; then
      [ -n "$told" ] || say "another run is installing (process $holder); waiting for it"
      told=yes
      sleep 1
    else
      break_lock "$holder"
    fi
  done
  echo "$$" >"$lock/pid"
  trap 'rm -rf "$lock"' EXIT
  trap 'exit 130' INT
  trap 'exit 143' TERM HUP
}

# Moves a dead holder's lock away. A lock without a number may be a second old, and one moved by mistake is put back.
break_lock() {
  sleep 1
  if [ "$(cat "$lock/pid" 2>/dev/null)" = "$1" ] && mv "$lock" "$lock.$$" 2>/dev/null; then
    [ "$(cat "$lock.$$/pid" 2>/dev/null)" = "$1" ] || mv "$lock.$$" "$lock" 2>/dev/null || true
    rm -rf "$lock.$$"
  fi
}

# Runs a command with its output in a file, and shows the file's end if the command fails.
logged() {
  log=$state/$1
  shift
  "$@" >"$log" 2>&1 || {
    tail -n 30 "$log" >&2
    return 1
  }
}

as_root() {
  if [ "$(id -u)" = 0 ]; then
    "$@"
  elif found sudo && { sudo -n true 2>/dev/null || [ -t 0 ]; }; then
    sudo "$@"
  else
    return 126
  fi
}

apt_get() { as_root env DEBIAN_FRONTEND=noninteractive apt-get -y -q -o DPkg::Lock::Timeout=300 "$@"; }

install_packages() {
  # shellcheck disable=SC2086 # a list of names
  set -- $1
  found apt-get && found dpkg ||
    fail "Not a Debian system: install what brings $* (MariaDB 10.6 or newer), or let DATABASE_URL point at any MariaDB 10.6+."
  as_root true 2>/dev/null || fail "Root is needed once; please run: sudo apt-get install --no-install-recommends $*"
  say "installing $* with apt-get (log: $state/apt.log)"
  if [ -n "$(dpkg --audit 2>/dev/null)" ]; then logged dpkg.log as_root dpkg --configure -a || true; fi
  # The lists may be absent or out of date: they are fetched when the first try says so.
  logged apt.log apt_get install --no-install-recommends "$@" 2>/dev/null && return
  say "fetching Debian's package lists"
  logged apt-update.log apt_get update || fail "apt-get update failed."
  logged apt.log apt_get install --no-install-recommends "$@" || fail "apt-get could not install $*."
}

install_npm() {
  say "installing npm packages (log: $state/npm-ci.log)"
  made_from=$(wanted_stamp)
  rm -f "$stamp"
  logged npm-ci.log npm ci --include=dev --no-audit --no-fund || fail "npm ci failed."
  echo "$made_from" >"$stamp"
}

check_node
if [ -n "$(missing_packages)" ] || ! npm_is_current; then
  take_lock
  missing=$(missing_packages)
  if [ -n "$missing" ]; then install_packages "$missing"; fi
  if ! npm_is_current; then install_npm; fi
  say "everything needed is there"
fi

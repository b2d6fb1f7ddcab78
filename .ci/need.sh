# Sourced by the scripts of this folder.

# fetch PACKAGE…: install Debian packages.
fetch() {
  local sudo=""
  [ "$(id -u)" = 0 ] || sudo="sudo"
  command -v apt-get >/dev/null 2>&1 || { echo "$* is needed and there is no apt-get to install it with" >&2; exit 1; }
  DEBIAN_FRONTEND=noninteractive $sudo apt-get update -qq
  DEBIAN_FRONTEND=noninteractive $sudo apt-get install -y -qq --no-install-recommends "$@" >/dev/null
}

# need PROGRAM PACKAGE…: install packages if a program is missing.
need() { command -v "$1" >/dev/null 2>&1 || fetch "${@:2}"; }

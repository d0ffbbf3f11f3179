# shellcheck shell=bash
# Shell functions shared by cases/first-run, tests/run and .ci/run; sourced, not run.
root=$(cd "$(dirname "${BASH_SOURCE[0]}")/.." && pwd)

# Says what is about to happen, set apart from the output of the tools.
say() { printf '\n== %s\n' "$*"; }

# Installs the Debian packages named in the given lists that are not there yet.
install_packages() {
  local list name status missing=()
  for list in "$@"; do
    while read -r name; do
      [[ -z "$name" || "$name" == \#* ]] && continue
      status=$(dpkg-query -W -f '${db:Status-Status}' "$name" 2>/dev/null || true)
      [[ "$status" == installed ]] || missing+=("$name")
    done <"$list"
  done
  ((${#missing[@]})) || return 0
  say "Installing ${missing[*]}"
  local as_root=()
  ((EUID == 0)) || as_root=(sudo)
  "${as_root[@]}" apt-get update -q
  "${as_root[@]}" env DEBIAN_FRONTEND=noninteractive \
    apt-get install -q -y --no-install-recommends "${missing[@]}"
}

# Configures a build folder and builds the targets: build_falcate FOLDER [CMAKE_OPTION...] -- [TARGET...]
build_falcate() {
  local folder=$1 options=()
  shift
  while (($#)) && [[ "$1" != -- ]]; do
    options+=("$1")
    shift
  done
  (($#)) && shift
  if command -v ccache >/dev/null; then
    export CCACHE_BASEDIR=$root  # one clone profits from what another has compiled
    options+=(-DCMAKE_CXX_COMPILER_LAUNCHER=ccache)
  fi
  say "Building in $folder"
  cmake -S "$root" -B "$folder" -G Ninja -DCMAKE_BUILD_TYPE=Release "${options[@]}" &&
    cmake --build "$folder" ${1:+--target "$@"}
}

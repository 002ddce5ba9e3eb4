# shellcheck shell=bash
# Shell functions that ./tests/run and ./station/demo share. Whoever sources this sets `top`, the clone's folder, and
# `logs`, a folder for what build tools print. Nothing here removes a package, and nothing asks a question.
: "${top:?}" "${logs:?}"

say() { printf '%s\n' "$@"; }

# The packages of the given lists, without comments.
packages_of() { sed 's/#.*//' "$@" | grep -o '[^[:space:]]\+'; }

is_installed() { [ "$(dpkg-query -W -f '${Status}' "$1" 2>/dev/null)" = "install ok installed" ]; }

# Debian's Boost 1.74 development package and 1.81 exclude each other. Where the older one is there, it stays.
has_older_boost() { is_installed libboost1.74-dev; }

missing_packages() {
  local package
  for package in $(packages_of "$@"); do
    [ "$package" = libboost1.81-dev ] && has_older_boost && continue
    is_installed "$package" || say "$package"
  done
}

# Root already, or sudo that works without a question (on a terminal it may ask for the password).
may_become_root() {
  [ "$(id -u)" = 0 ] || { command -v sudo >/dev/null && { sudo -n true 2>/dev/null || [ -t 0 ]; }; }
}

# Installs what is missing of the lists. Exits 3 with the names when it may not.
install_missing() {
  local -a missing prefix
  mapfile -t missing < <(missing_packages "$@")
  if [ "${#missing[@]}" = 0 ]; then
    say "All packages are there."
    return 0
  fi
  if ! command -v apt-get >/dev/null; then
    say "This machine has no apt-get. Install what these Debian 12 packages hold, then start again:" "  ${missing[*]}"
    exit 3
  fi
  if ! may_become_root; then
    say "These packages are missing, and there is neither root nor sudo to install them:" "  ${missing[*]}" \
      "Ask for: apt-get install --no-remove --no-install-recommends ${missing[*]}"
    exit 3
  fi
  [ "$(id -u)" = 0 ] && prefix=(env) || prefix=(sudo env)
  say "Will install, and remove nothing:" "  ${missing[*]}"
  "${prefix[@]}" apt-get update -qq || say "The package lists could not be fetched; going on with those that are there."
  if ! "${prefix[@]}" DEBIAN_FRONTEND=noninteractive \
    apt-get install -y -qq --no-remove --no-install-recommends "${missing[@]}"; then
    say "apt-get could not install them (see above). Nothing was removed."
    exit 3
  fi
}

# Sets boost_option to what CMake needs to find Boost 1.81: nothing where the package is installed, else its headers
# unpacked into build/boost.
find_boost() {
  local folder=$top/build/boost
  boost_option=-DPW_BOOST_INCLUDE=
  is_installed libboost1.81-dev && return 0
  boost_option=-DPW_BOOST_INCLUDE=$folder/usr/include
  [ -f "$folder/usr/include/boost/version.hpp" ] && return 0
  say "Boost 1.74 is installed and stays; unpacking the 1.81 headers into build/boost."
  mkdir -p "$folder"
  if ! (cd "$folder" && apt-get download -qq libboost1.81-dev && dpkg -x libboost1.81-dev_*.deb . && rm -f ./*.deb); then
    say "The headers of Boost 1.81 could not be fetched with apt-get download libboost1.81-dev."
    exit 3
  fi
}

# Passes on a progress line now and then, and all that is no progress line.
some_progress() {
  awk -F'[][/]' '/^\[[0-9]+\/[0-9]+\]/ { if ($2 % 25 == 1 || $2 == $3) { print; fflush() } next } { print; fflush() }'
}

# configure PRESET [cmake option...]
configure() {
  local preset=$1
  shift
  (cd "$top" && cmake --preset "$preset" "$boost_option" "$@") >"$logs/configure-$preset.log" 2>&1 && return 0
  tail -n 30 "$logs/configure-$preset.log"
  return 1
}

# build PRESET TARGET...: all processors; goes on after an error, so that one run tells all of them.
build() {
  local preset=$1
  shift
  if [ -t 1 ]; then
    ninja -C "$top/build/$preset" -j "$(nproc)" -k 0 "$@"
  else
    ninja -C "$top/build/$preset" -j "$(nproc)" -k 0 "$@" 2>&1 | some_progress
    return "${PIPESTATUS[0]}"
  fi
}

# make_preset PRESET [cmake option...] TARGET...: configures and builds with several files compiled at once, which takes half
# the time. If two files of a target got helpers of the same name, that fails though the code is right: then each file is
# compiled alone.
make_preset() {
  local preset=$1
  local -a options=()
  shift
  while [[ ${1-} == -D* ]]; do
    options+=("$1")
    shift
  done
  configure "$preset" -DPW_JOIN_FILES=ON "${options[@]}" || return 1
  build "$preset" "$@" && return 0
  say "Building anew with each file compiled alone."
  configure "$preset" -DPW_JOIN_FILES=OFF && build "$preset" "$@"
}

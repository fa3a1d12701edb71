# shellcheck shell=sh
# What start.sh, tests/run.sh and the checks share; sourced, not run.
#
#   need PROBE PACKAGE...   notes Debian packages to install if the command line PROBE fails
#   install_needed          installs what was noted; false, having said why, if it cannot
#   mirror FROM TO          makes the source files in TO those of FROM, touching changed ones only
#   build FROM TO [OPTION]  configures and builds in TO, quietly; shows the log if that fails

say() { printf 'gaswright: %s\n' "$*" >&2; }

needed=

need() {
  probe=$1
  shift
  sh -c "$probe" > /dev/null 2>&1 || needed="$needed $*"
}

# What a build cannot do without.  Probes ask for the thing used, not for its package.
need_for_build() {
  need 'command -v cc' gcc libc6-dev
  need 'command -v make' make
  need 'command -v awk' mawk
  need 'command -v autoreconf' autoconf
  need 'command -v automake' automake
  need 'command -v pkg-config && ls /usr/share/aclocal/pkg.m4' pkg-config
  need 'pkg-config --exists gsl' libgsl-dev
}

need_for_prompt() {
  need 'pkg-config --exists readline' libreadline-dev
}

need_for_tests() {
  need 'pkg-config --exists cunit' libcunit1-dev
  need 'command -v python3' python3
  need 'command -v mandoc' mandoc
}

# Outside references: a test that misses one skips with a notice.
need_for_references() {
  need 'command -v udunits2' udunits-bin
  need 'python3 -c "import pint"' python3-pint
  need 'python3 -c "import periodictable"' python3-periodictable
  need 'python3 -c "import iapws"' python3-iapws
  need 'python3 -c "import uncertainties"' python3-uncertainties
  need 'python3 -c "import html5lib"' python3-html5lib
  need 'command -v tidy' tidy
}

# Runs a command as root, with no input and its output kept out of ours.
as_root() {
  if [ "$(id -u)" = 0 ]; then
    "$@"
  elif [ -t 2 ]; then
    sudo "$@"
  else
    sudo -n "$@"
  fi < /dev/null 1>&2
}

apt_get() {
  as_root env DEBIAN_FRONTEND=noninteractive apt-get -qq -y -o Dpkg::Use-Pty=0 "$@"
}

install_needed() {
  [ -n "$needed" ] || return 0
  if ! command -v apt-get > /dev/null 2>&1; then
    say "these packages are missing and there is no apt-get to install them:$needed"
    return 1
  fi
  if [ "$(id -u)" != 0 ] && ! command -v sudo > /dev/null 2>&1; then
    say "these packages are missing and only root can install them:$needed"
    return 1
  fi
  say "installing missing packages:$needed"
  # The lists may be absent or old; they are fetched only then.
  # shellcheck disable=SC2086  # a list of words
  if apt_get install --no-install-recommends $needed 2> /dev/null \
      || { apt_get update && apt_get install --no-install-recommends $needed; }; then
    needed=
  else
    say "could not install:$needed"
    return 1
  fi
}

# Prints checksum, size and name of every source file of the tree $1, sorted.
manifest() (
  cd "$1" || exit 1
  for item in configure.ac Makefile.am LICENSE README.md DEVELOPERS.md src tables man tests; do
    [ ! -e "$item" ] || find "$item" -type f ! -name '*~' ! -name '*.[ao]' ! -name '.*'
  done | tr '\n' '\0' | xargs -0 cksum | LC_ALL=C sort
)

# A changed file gets a new time, so that make sees it however old the file in FROM is.
mirror() {
  mkdir -p "$2" && manifest "$1" > "$2/.manifest.new" || return 1
  [ -e "$2/.manifest" ] || : > "$2/.manifest"
  cmp -s "$2/.manifest" "$2/.manifest.new" && return 0
  LC_ALL=C comm -23 "$2/.manifest" "$2/.manifest.new" | cut -d ' ' -f 3- |
    while IFS= read -r file; do rm -f "$2/$file"; done
  LC_ALL=C comm -13 "$2/.manifest" "$2/.manifest.new" | cut -d ' ' -f 3- |
    while IFS= read -r file; do
      mkdir -p "$(dirname "$2/$file")" && cp "$1/$file" "$2/$file" && chmod u+w "$2/$file" \
        || exit 1
    done || return 1
  mv -f "$2/.manifest.new" "$2/.manifest"
}

processors() { nproc 2> /dev/null || echo 1; }

# True if autoconf can work in a folder of this name.
plain_name() {
  case $1 in
    *[!A-Za-z0-9_/.,+:@%~-]*) return 1 ;;
    /*) return 0 ;;
    *) return 1 ;;
  esac
}

build_steps() {
  if [ ! -x "$from/configure" ]; then
    (cd "$from" && autoreconf -fi) || return 1
  fi
  mkdir -p "$to" && cd "$to" || return 1
  if [ ! -e Makefile ]; then
    "$from/configure" "$@" || return 1
  fi
  make -j"$(processors)"
}

build() {
  from=$1
  to=$2
  shift 2
  mkdir -p "$to" || return 1
  (build_steps "$@") > "$to/build.log" 2>&1 < /dev/null && return 0
  tail -n 40 "$to/build.log" >&2
  say "the build failed; all it said is in $to/build.log"
  return 1
}

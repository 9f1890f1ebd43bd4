# Sourced by docs/examples/run.sh and tests/run.sh: installs Debian packages that are missing, configures and builds.
# Needs $root (the source folder). Sets $build. Talk goes to stderr, so that stdout holds answers only.

build=${SEPTUM_BUILD:-$root/build}

# Package lists: what the program needs, and what the tests need besides.
packages_build="cmake ninja-build pkg-config libglpk-dev libcjson-dev libxlsxwriter-dev"
packages_test="check libsubunit-dev libgsl-dev glpk-utils coinor-cbc python3 python3-jsonschema python3-openpyxl python3-html5lib clang libclang-rt-dev chromium poppler-utils"

septum_talk() { printf '%s\n' "$*" >&2; }

septum_as_root() {
  if [ "$(id -u)" -eq 0 ]; then "$@"; else sudo "$@"; fi
}

# septum_install build|test
septum_install() {
  wanted=$packages_build
  [ "$1" = test ] && wanted="$wanted $packages_test"
  command -v "${CC:-cc}" >/dev/null 2>&1 || wanted="build-essential $wanted"
  missing=""
  for package in $wanted; do
    dpkg-query -W -f '${Status}' "$package" 2>/dev/null | grep -q 'ok installed' ||
      missing="$missing $package"
  done
  [ -z "$missing" ] && return 0
  septum_talk "installing:$missing"
  septum_as_root apt-get update -qq >&2
  # shellcheck disable=SC2086
  septum_as_root env DEBIAN_FRONTEND=noninteractive apt-get install -y -qq \
    --no-install-recommends $missing >&2
}

# septum_build [cmake options]
septum_build() {
  septum_talk "building into $build"
  cmake -S "$root" -B "$build" -G Ninja -DSEPTUM_WERROR="${SEPTUM_WERROR:-OFF}" "$@" >&2 &&
    cmake --build "$build" >&2
}

#!/usr/bin/env bash
# SPDX-License-Identifier: GPL-3.0-or-later
# Installs what is missing, builds everything with warnings as errors, and passes all tests.
#   BUILD_DIR=...   build folder (default: build)
#   SKIP_CHECKS=1   only build and run the tests: no formatter and no linter
# The sanitizer builds are apart, since each is a whole build of its own: see tests/sanitize.sh.
set -euo pipefail
cd "$(dirname "$0")/.."
. app/build.sh
build_dir=${BUILD_DIR:-build}
started=$SECONDS

step() { printf '\n== %s (%d s)\n' "$1" $((SECONDS - started)); }

step "packages"
install_packages app/packages.txt tests/packages.txt

step "build"
build "$build_dir" -DSINEWRIGHT_BENCH=ON --

step "tests"
ctest --test-dir "$build_dir" --output-on-failure --no-tests=error -j "$(nproc)"

if [ -z "${SKIP_CHECKS:-}" ]; then
    step "format"
    git ls-files '*.h' '*.cpp' | xargs clang-format --dry-run -Werror

    step "lint"
    tests/lint.sh "$build_dir"
fi
step "done"

#!/usr/bin/env bash
# SPDX-License-Identifier: GPL-3.0-or-later
# Builds and runs the tests that carry the risk under a sanitizer.
#   tests/sanitize.sh address|thread BUILD_DIR
set -euo pipefail
cd "$(dirname "$0")/.."
. app/build.sh
kind=$1
build_dir=$2
case $kind in
address) label=memory ;;
thread) label=threads ;;
*) echo "tests/sanitize.sh: '$kind' is no sanitizer; use address or thread" >&2; exit 2 ;;
esac
build "$build_dir" "-DSINEWRIGHT_SANITIZE=$kind" -DCMAKE_BUILD_TYPE=RelWithDebInfo -- "tests_$label"
ctest --test-dir "$build_dir" --output-on-failure --no-tests=error -j "$(nproc)" -L "$label"

#!/usr/bin/env bash
# SPDX-License-Identifier: GPL-3.0-or-later
# Measures anew what the project claims and prints a line a figure: name | value | bar | met (or missed).
#   tests/figures.sh bench
#   BUILD_DIR=...         build folder (default: build)
#   CAPTURE_SECONDS=...   length of the capture beside a busy core (default: 600)
# Exit 0 when every bar is met, 1 when one is missed, 2 for a name that is not known.
set -euo pipefail
cd "$(dirname "$0")/.."
. app/build.sh
build_dir=${BUILD_DIR:-build}
name=${1:-}
missed=0

# Prints the figures among a program's output; its failure counts as a missed figure.
figures_of() {
    local output status=0
    output=$("$@" 2>&1) || status=$?
    grep -E '^[^|]+( \| [^|]+){2} \| (met|missed)$' <<<"$output" | sed -E 's/^QINFO +: [^()]*\([^)]*\) //' || true
    if [ "$status" != 0 ]; then
        grep -q ' | missed$' <<<"$output" || printf '%s | failed (exit %s) | passes | missed\n' "$(basename "$1")" "$status"
        missed=1
    fi
}

case $name in
bench)
    build "$build_dir" -DSINEWRIGHT_BENCH=ON -- figures_bench >&2
    export QT_QPA_PLATFORM=offscreen LC_ALL=C.UTF-8
    tests=$build_dir/tests
    figures_of "$tests/figures_bench"
    figures_of "$tests/tst_lamp_oscillator"
    figures_of "$tests/tst_realtime_callback"
    figures_of "$tests/tst_card_watchdog"
    figures_of "$tests/card_soak" "${CAPTURE_SECONDS:-600}"
    ;;
*)
    echo "tests/figures.sh: there are no figures named '$name'; use bench" >&2
    exit 2
    ;;
esac
exit "$missed"

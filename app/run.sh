#!/usr/bin/env bash
# SPDX-License-Identifier: GPL-3.0-or-later
# Installs what is missing, builds, and opens the window on the demo oscillator. Without a display the same window runs
# off screen for a while and leaves a picture and a reading.
set -euo pipefail
cd "$(dirname "$0")/.."
. app/build.sh
build_dir=${BUILD_DIR:-build}

install_packages app/packages.txt
build "$build_dir" -- sinewright

if [ -n "${DISPLAY:-}${WAYLAND_DISPLAY:-}" ]; then
    exec "$build_dir/bin/sinewright" --source demo "$@"
fi
echo "No display: the window runs off screen for a few seconds."
picture=$build_dir/sinewright-demo.png
"$build_dir/bin/sinewright" --source demo --picture "$picture" "$@"
echo "Picture: $picture"
"$build_dir/bin/sinewright" measure demo

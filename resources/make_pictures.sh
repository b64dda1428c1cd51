#!/usr/bin/env bash
# SPDX-License-Identifier: GPL-3.0-or-later
# Makes the pictures of the README anew: the Trim page after three minutes of trimming the demo oscillator, in both
# themes and two window sizes. The four windows run off screen beside each other.
set -euo pipefail
cd "$(dirname "$0")/.."
build_dir=${BUILD_DIR:-build}
stops=296,318,340,358,372,384,392,381,366,374,369,370
mkdir -p resources/pictures
runs=()
for theme in paper dusk; do
    for size in 1280x800 1920x1080; do
        QT_QPA_PLATFORM=offscreen "$build_dir/bin/sinewright" --source demo --theme "$theme" --size "$size" \
            --trimmer "$stops" --after 178 --picture "resources/pictures/trim-$theme-$size.png" &
        runs+=($!)
    done
done
for run in "${runs[@]}"; do
    wait "$run"
done

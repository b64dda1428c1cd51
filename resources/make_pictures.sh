#!/usr/bin/env bash
# SPDX-License-Identifier: GPL-3.0-or-later
# Makes the README's pictures anew: the Trim page on the demo oscillator, both themes, two sizes.
set -euo pipefail
cd "$(dirname "$0")/.."
build_dir=${BUILD_DIR:-build}
for theme in paper dusk; do
    for size in 1280x800 1920x1080; do
        "$build_dir/bin/sinewright" --source demo --theme "$theme" --size "$size" --after 20 \
            --picture "resources/pictures/trim-$theme-$size.png"
    done
done

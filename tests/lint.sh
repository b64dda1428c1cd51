#!/usr/bin/env bash
# SPDX-License-Identifier: GPL-3.0-or-later
# Runs clang-tidy over the folders that changed since a base: by default since the newest commit that is half a day older
# than the last one; over all of them where there is no such commit.
#   tests/lint.sh BUILD_DIR [BASE]
set -euo pipefail
cd "$(dirname "$0")/.."
build_dir=$1
half_day_ago=$(($(git log -1 --format=%ct) - 12 * 3600))
base=${2:-$(git rev-list -1 --before="@$half_day_ago" HEAD)}
folders=(core audio ui app)
if [ -n "$base" ]; then
    mapfile -t folders < <(git diff --name-only "$base" -- "${folders[@]}" | cut -d/ -f1 | sort -u)
fi
[ ${#folders[@]} -gt 0 ] || { echo "nothing changed in core, audio, ui or app"; exit 0; }
git ls-files -- "${folders[@]/%//*.cpp}" | xargs -P "$(nproc)" -n 4 \
    clang-tidy --quiet -p "$build_dir" --extra-arg=-Wno-unknown-warning-option 2>/dev/null

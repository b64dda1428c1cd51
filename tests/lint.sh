#!/usr/bin/env bash
# SPDX-License-Identifier: GPL-3.0-or-later
# Runs clang-tidy over the folders that changed since a base (all of them without one).
#   tests/lint.sh BUILD_DIR [BASE]
set -euo pipefail
cd "$(dirname "$0")/.."
build_dir=$1
base=${2:-}
folders=(core audio ui app)
if [ -n "$base" ]; then
    mapfile -t folders < <(git diff --name-only "$base" -- "${folders[@]}" | cut -d/ -f1 | sort -u)
fi
[ ${#folders[@]} -gt 0 ] || { echo "nothing changed in core, audio, ui or app"; exit 0; }
git ls-files -- "${folders[@]/%//*.cpp}" | xargs -P "$(nproc)" -n 4 \
    clang-tidy --quiet -p "$build_dir" --extra-arg=-Wno-unknown-warning-option 2>/dev/null

#!/usr/bin/env bash
# SPDX-License-Identifier: GPL-3.0-or-later
# Shared by app/run.sh and tests/run.sh; not for running by itself.
#   install_packages FILE...   installs the Debian packages listed there that are missing
#   build DIR [cmake option...] -- [target...]

install_packages() {
    local missing=() name
    while read -r name; do
        dpkg-query -W -f='${db:Status-Status}' "$name" 2>/dev/null | grep -qx installed || missing+=("$name")
    done < <(grep -hvE '^(#|$)' "$@")
    [ ${#missing[@]} -gt 0 ] || return 0
    local root=()
    if [ "$(id -u)" != 0 ]; then
        root=(sudo)
        echo "Installing ${#missing[@]} packages needs administrator rights: ${missing[*]}" >&2
    fi
    "${root[@]}" apt-get -qq update
    "${root[@]}" env DEBIAN_FRONTEND=noninteractive apt-get -qq install -y --no-install-recommends "${missing[@]}" >/dev/null
}

build() {
    local dir=$1 options=()
    shift
    while [ "$1" != -- ]; do
        options+=("$1")
        shift
    done
    shift
    cmake -S "$(dirname "${BASH_SOURCE[0]}")/.." -B "$dir" -G Ninja -DSINEWRIGHT_WERROR=ON "${options[@]}" >"$dir.configure.log" 2>&1 ||
        { cat "$dir.configure.log" >&2; return 1; }
    rm -f "$dir.configure.log"
    cmake --build "$dir" ${1:+--target "$@"}
}

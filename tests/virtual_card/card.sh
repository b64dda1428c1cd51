#!/bin/sh
# SPDX-License-Identifier: GPL-3.0-or-later
# A sound card for machines that have none: a private PulseAudio server whose null sink plays into its own monitor.
# Touches nothing outside DIR and needs no D-Bus, no display, no sound hardware.
#
#   card.sh serve DIR   prepare DIR and become the server
#   card.sh env DIR     print what a program must have in its environment, as lines NAME=VALUE
#   card.sh start DIR   serve in the background and return when it answers; the process id goes to DIR/pid
#   card.sh stop DIR    end the server that start began, by that id
#
# In a shell:  card.sh start DIR; env $(card.sh env DIR) sinewright measure card:pulse; card.sh stop DIR
# Packages (Debian 12): pulseaudio pulseaudio-utils libasound2-plugins
set -eu

fail() {
    echo "card.sh: $*" >&2
    exit 1
}

[ $# -eq 2 ] || fail "usage: card.sh serve|env|start|stop DIR"
mkdir -p "$2"
dir=$(cd "$2" && pwd)

card_env() {
    echo "HOME=$dir/home"
    echo "XDG_RUNTIME_DIR=$dir/run"
    echo "PULSE_SERVER=unix:$dir/run/pulse/native"
    echo "PULSE_SINK=bench"
    echo "PULSE_SOURCE=bench.monitor"
}

prepare() {
    mkdir -p "$dir/home/.config/pulse" "$dir/run"
    chmod 700 "$dir/run"
    # What ALSA programs, PortAudio among them, find as "pulse" and "default".
    cat > "$dir/home/.asoundrc" <<'EOF'
pcm.!default { type pulse }
ctl.!default { type pulse }
EOF
    # A killed server must stay dead until the test wants it back.
    echo "autospawn = no" > "$dir/home/.config/pulse/client.conf"
}

serve() {
    prepare
    unset PULSE_SERVER
    # shellcheck disable=SC2046
    exec env -u DISPLAY -u DBUS_SESSION_BUS_ADDRESS $(card_env | grep -v '^PULSE_') \
        pulseaudio -n --daemonize=no --exit-idle-time=-1 --disallow-exit=yes --log-level=error \
        -L module-native-protocol-unix \
        -L "module-null-sink sink_name=bench rate=96000 format=float32le channels=2"
}

answers() {
    # shellcheck disable=SC2046
    env $(card_env) pactl info > /dev/null 2>&1
}

case $1 in
serve)
    serve
    ;;
env)
    card_env
    ;;
start)
    (serve) > "$dir/log" 2>&1 &
    pid=$!
    echo "$pid" > "$dir/pid"
    tries=100
    until answers; do
        kill -0 "$pid" 2> /dev/null || fail "the server ended: see $dir/log"
        tries=$((tries - 1))
        [ "$tries" -gt 0 ] || fail "the server does not answer: see $dir/log"
        sleep 0.1
    done
    ;;
stop)
    [ -f "$dir/pid" ] || fail "nothing was started in $dir"
    pid=$(cat "$dir/pid")
    rm "$dir/pid"
    kill "$pid" 2> /dev/null || exit 0
    while kill -0 "$pid" 2> /dev/null; do
        sleep 0.05
    done
    ;;
*)
    fail "usage: card.sh serve|env|start|stop DIR"
    ;;
esac

// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/processor_time.h"

#include <ctime>

namespace sinewright::app {

namespace {

double secondsOf(clockid_t clock)
{
    constexpr double kNano = 1e-9;
    timespec time{};
    clock_gettime(clock, &time);
    return static_cast<double>(time.tv_sec) + static_cast<double>(time.tv_nsec) * kNano;
}

} // namespace

double threadSeconds()
{
    return secondsOf(CLOCK_THREAD_CPUTIME_ID);
}

double processSeconds()
{
    return secondsOf(CLOCK_PROCESS_CPUTIME_ID);
}

double steadySeconds()
{
    return secondsOf(CLOCK_MONOTONIC);
}

} // namespace sinewright::app

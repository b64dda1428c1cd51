// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/oscillator/lamp_oscillator.h"

#include <benchmark/benchmark.h>

#include <cmath>
#include <vector>

using namespace sinewright::core;

namespace {

constexpr std::size_t kBlock = 1U << 14U;

/// Seconds of signal in a second of one core.
void reportRealtime(benchmark::State& state, double rateHz)
{
    const double seconds = static_cast<double>(state.iterations()) * kBlock / rateHz;
    state.counters["realtime_factor"] = benchmark::Counter(seconds, benchmark::Counter::kIsRate);
}

/// Arguments: rate [Hz], trimmer [ohm].
void BM_LampOscillator(benchmark::State& state)
{
    const SampleRate rate{static_cast<double>(state.range(0))};
    const auto trimmerOhm = static_cast<double>(state.range(1));
    LampOscillatorParts parts;
    parts.warmUpKelvin = 9.0;
    parts.lampJitter = 2e-5;
    LampOscillator oscillator(parts, rate, 1);
    oscillator.startSettled(trimmerOhm);
    std::vector<double> volts(kBlock);
    oscillator.run(trimmerOhm, volts);
    for (auto _ : state) {
        oscillator.run(trimmerOhm, volts);
        benchmark::DoNotOptimize(volts.data());
    }
    reportRealtime(state, rate.hz);
}

/// The naive baseline: a sine from the library, no physics.
void BM_LibrarySine(benchmark::State& state)
{
    constexpr double kRateHz = 192e3;
    std::vector<double> volts(kBlock);
    double phase = 0.0;
    for (auto _ : state) {
        for (double& volt : volts) {
            volt = std::sin(phase);
            phase += 0.0389;
        }
        benchmark::DoNotOptimize(volts.data());
    }
    reportRealtime(state, kRateHz);
}

} // namespace

// Clear of the rails, at the best trim, heavily clipped; and where several steps make a sample.
BENCHMARK(BM_LampOscillator)
    ->Args({192'000, 260})
    ->Args({192'000, 370})
    ->Args({192'000, 480})
    ->Args({96'000, 370})
    ->Args({44'100, 370});
BENCHMARK(BM_LibrarySine);

BENCHMARK_MAIN();

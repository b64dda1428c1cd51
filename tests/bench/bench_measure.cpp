// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/analyser.h"
#include "core/measure/meter.h"

#include <benchmark/benchmark.h>
#include <fftw3.h>

#include <algorithm>
#include <cmath>
#include <span>
#include <vector>

#include "tests/support/signals.h"

using namespace sinewright;

namespace {

std::vector<double> noisyTone(double rateHz, std::size_t count)
{
    const tests::ToneSpec spec{.rateHz = rateHz, .partials = {{2, 1e-4, 0.0}, {3, 3e-5, 1.0}}};
    return tests::sum(tests::tone(spec, count), tests::whiteNoise(1e-5, count, 1));
}

void reportRealtime(benchmark::State& state, double secondsEach)
{
    state.counters["realtime_factor"] = benchmark::Counter(
        static_cast<double>(state.iterations()) * secondsEach, benchmark::Counter::kIsRate);
}

/// The bare baseline: one real transform of the same length, planned as the reading plans it.
void BM_BareTransform(benchmark::State& state)
{
    const auto count = static_cast<std::size_t>(state.range(0));
    double* const input = fftw_alloc_real(count);
    fftw_complex* const output = fftw_alloc_complex(count / 2 + 1);
    const fftw_plan plan = fftw_plan_dft_r2c_1d(
        static_cast<int>(count), input, output, FFTW_ESTIMATE | FFTW_PRESERVE_INPUT);
    std::ranges::copy(noisyTone(48000.0, count), input);
    for (auto _ : state) {
        fftw_execute(plan);
        benchmark::DoNotOptimize(output);
    }
    fftw_destroy_plan(plan);
    fftw_free(input);
    fftw_free(output);
}

void BM_FullReading(benchmark::State& state)
{
    const auto samples = noisyTone(48000.0, static_cast<std::size_t>(state.range(0)));
    core::Meter meter;
    benchmark::DoNotOptimize(meter.measure(samples, {48000.0}, {}));
    for (auto _ : state) {
        benchmark::DoNotOptimize(meter.measure(samples, {48000.0}, {}));
    }
    reportRealtime(state, static_cast<double>(samples.size()) / 48000.0);
}

/// 0.1 s with the cycle, at a rate.
void BM_QuickReading(benchmark::State& state)
{
    const auto rateHz = static_cast<double>(state.range(0));
    const auto samples = noisyTone(rateHz, static_cast<std::size_t>(rateHz / 10.0));
    core::Meter meter;
    benchmark::DoNotOptimize(meter.measure(samples, {rateHz}, {}, true));
    for (auto _ : state) {
        benchmark::DoNotOptimize(meter.measure(samples, {rateHz}, {}, true));
    }
    reportRealtime(state, 0.1);
}

/// Everything that is done live, 20 quick and 2 full readings a second; arguments: rate and tone [Hz].
void BM_Analyser(benchmark::State& state)
{
    const auto rateHz = static_cast<double>(state.range(0));
    const auto count = static_cast<std::size_t>(rateHz);
    const tests::ToneSpec spec{.rateHz = rateHz,
                               .frequencyHz = static_cast<double>(state.range(1)),
                               .partials = {{2, 1e-4, 0.0}, {3, 3e-5, 1.0}}};
    // A second that joins onto itself.
    const auto samples = tests::sum(tests::tone(spec, count), tests::whiteNoise(1e-5, count, 1));
    core::AnalyserConfig config;
    config.rate = {rateHz};
    core::Analyser analyser(config);
    std::uint64_t position = 0;
    const auto feedOneSecond = [&] {
        constexpr std::size_t kBlock = 1024;
        for (std::size_t start = 0; start < count; start += kBlock) {
            const auto part = std::span(samples).subspan(start, std::min(kBlock, count - start));
            benchmark::DoNotOptimize(
                analyser.feed({.firstFrame = position, .lostBefore = 0, .samples = part}));
            position += part.size();
        }
    };
    for (int warmUp = 0; warmUp < 3; ++warmUp) {
        feedOneSecond();
    }
    for (auto _ : state) {
        feedOneSecond();
    }
    reportRealtime(state, 1.0);
}

} // namespace

BENCHMARK(BM_BareTransform)
    ->RangeMultiplier(4)
    ->Range(1 << 14, 1 << 22)
    ->Unit(benchmark::kMillisecond);
BENCHMARK(BM_FullReading)
    ->RangeMultiplier(4)
    ->Range(1 << 14, 1 << 22)
    ->Unit(benchmark::kMillisecond);
BENCHMARK(BM_QuickReading)->Arg(48000)->Arg(192000)->Unit(benchmark::kMillisecond);
BENCHMARK(BM_Analyser)
    ->Args({48000, 1000})
    ->Args({192000, 1000})
    ->Args({192000, 20})
    ->Unit(benchmark::kMillisecond);

BENCHMARK_MAIN();

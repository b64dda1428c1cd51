// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/virtual_bench.h"

#include <algorithm>
#include <cassert>
#include <numbers>

namespace sinewright::audio {

namespace {

/// Full travel in 0.3 s: a quick twist.
constexpr double kHandOhmPerS = (kDemoTrimmerHighestOhm - kDemoTrimmerLowestOhm) / 0.3;

/// Tells the converter's noise from the oscillator's, which has the plain seed.
constexpr std::uint64_t kConverterSeed = 0x636F6E7665727465U;

core::LampOscillatorParts hurried(core::LampOscillatorParts parts, double speedUp)
{
    parts.warmUpTimeConstantS /= speedUp;
    return parts;
}

} // namespace

VirtualBench::VirtualBench(const DemoSettings& settings, double trimmerOhm)
    : m_rateHz(settings.rate.hz)
    , m_perVolt(1.0 / (settings.fullScaleVrms * std::numbers::sqrt2))
    , m_noiseRms(core::rmsFromDbfs(settings.interfaceNoiseDbfs))
    , m_trimmerOhm(trimmerOhm)
    , m_oscillator(hurried(settings.parts, settings.warmUpSpeedUp), settings.rate, settings.seed)
    , m_hum(settings.humAtOutputVrms * std::numbers::sqrt2, settings.parts.humHz, settings.rate.hz)
    , m_noise(settings.seed ^ kConverterSeed)
{
    assert(settings.fullScaleVrms > 0.0 && settings.warmUpSpeedUp > 0.0);
    if (settings.startsCold) {
        m_oscillator.startCold(trimmerOhm);
    } else {
        m_oscillator.startSettled(trimmerOhm);
    }
}

void VirtualBench::render(double wantedOhm, std::span<double> samples) noexcept
{
    const double reach = kHandOhmPerS * static_cast<double>(samples.size()) / m_rateHz;
    m_trimmerOhm = std::clamp(wantedOhm, m_trimmerOhm - reach, m_trimmerOhm + reach);
    m_oscillator.run(m_trimmerOhm, samples);
    for (double& sample : samples) {
        const double heard = (sample + m_hum.next()) * m_perVolt + m_noiseRms * m_noise.next();
        sample = std::clamp(heard, -1.0, 1.0);
    }
}

} // namespace sinewright::audio

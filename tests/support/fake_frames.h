// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <memory>
#include <numbers>
#include <optional>
#include <random>
#include <vector>

namespace sinewright::tests {

/// Frames as a bench would give them while somebody trims an invented oscillator: crossover distortion falling with
/// level, a positive rail that is met, noise and a little hum. Seeded; nothing here is measured.
class FakeBench final
{
public:
    static constexpr double kFramesPerS = 20.0;
    static constexpr double kToneHz = 1189.234;
    static constexpr double kFullScaleVrms = 4.0;

    explicit FakeBench(double rateHz = 96000.0, std::uint32_t seed = 7)
        : m_rateHz(rateHz)
        , m_random(seed)
    {}

    /// The next frame, a twentieth of a second later, at this level of the oscillator [V rms].
    [[nodiscard]] std::shared_ptr<const core::Frame> next(double volts)
    {
        m_timeS += 1.0 / kFramesPerS;
        auto frame = std::make_shared<core::Frame>();
        frame->serial = ++m_serial;
        frame->rate = core::SampleRate{m_rateHz};
        frame->timeS = m_timeS;
        frame->rmsFs = volts / kFullScaleVrms / std::numbers::sqrt2;
        frame->peakFs = volts / kFullScaleVrms;
        frame->quick = reading(volts, 0.1, 0.01);
        const bool isSteady = std::abs(volts - m_lastVolts) < 0.002;
        m_steadyS = isSteady ? m_steadyS + 1.0 / kFramesPerS : 0.0;
        m_lastVolts = volts;
        if (m_serial % 10 == 0) {
            core::Reading full = reading(volts, 2.0, 0.001);
            if (m_steadyS < 2.0) {
                full.warnings.push_back(core::Warning::UnsteadyLevel);
            }
            m_full = full;
            frame->isFullNew = true;
            keepBest(full);
        }
        frame->full = m_full;
        addTrendPoint(frame->quick);
        frame->trend = m_isHurried ? nullptr : std::make_shared<core::TrendSnapshot>(m_trend);
        frame->spectrum = m_isHurried ? nullptr : spectrum(frame->quick);
        frame->cycle = cycle(frame->quick);
        return frame;
    }

    /// A frame in which nothing can be measured: silence or noise.
    [[nodiscard]] std::shared_ptr<const core::Frame> nextWithoutTone()
    {
        m_timeS += 1.0 / kFramesPerS;
        auto frame = std::make_shared<core::Frame>();
        frame->serial = ++m_serial;
        frame->rate = core::SampleRate{m_rateHz};
        frame->timeS = m_timeS;
        frame->rmsFs = 2e-6;
        frame->peakFs = 9e-6;
        frame->quick.status = core::ReadingStatus::NoTone;
        m_full.reset();
        addTrendPoint(frame->quick);
        frame->trend = std::make_shared<core::TrendSnapshot>(m_trend);
        frame->spectrum = spectrum(frame->quick);
        return frame;
    }

    /// Somebody trims for three minutes: from too little gain over the valley into the rail and back near the best.
    [[nodiscard]] std::shared_ptr<const core::Frame> trimFor(double seconds)
    {
        std::shared_ptr<const core::Frame> frame;
        const auto count = static_cast<int>(seconds * kFramesPerS);
        for (int i = 0; i < count; ++i) {
            m_isHurried = i + 1 < count; // nobody sees the spectra on the way
            frame = next(voltsAt(static_cast<double>(i) / count));
        }
        return frame;
    }

    /// [V rms] over the share 0 .. 1 of a trimming session: stops with moves and a little bounce between.
    [[nodiscard]] static double voltsAt(double share)
    {
        constexpr double kStops[] = {
            1.90, 2.05, 2.18, 2.31, 2.45, 2.60, 2.72, 2.61, 2.52, 2.38, 2.47, 2.50};
        constexpr int kCount = static_cast<int>(std::size(kStops));
        const double at = share * kCount;
        const int stop = std::min(kCount - 1, static_cast<int>(at));
        const double before = kStops[std::max(0, stop - 1)];
        const double settled = kStops[stop];
        const double t = (at - stop) * 15.0; // [s] into the stop
        const double bounce = std::exp(-1.6 * t) * std::cos(9.0 * t);
        return settled + (before - settled) * bounce;
    }

    [[nodiscard]] double timeS() const { return m_timeS; }
    void forgetBest() { m_trend.best.reset(); }

private:
    static double crossover(double volts) { return 0.0011 * 2.5 / volts; }
    static double clipping(double volts) { return 0.0004 * std::pow(volts / 2.5, 42.0); }

    core::Reading reading(double volts, double lengthS, double scatter)
    {
        std::normal_distribution<double> normal(0.0, 1.0);
        core::Reading r;
        r.status = core::ReadingStatus::Ok;
        r.startS = m_timeS - lengthS;
        r.lengthS = lengthS;
        r.frequencyHz = kToneHz * (1.0 - 3e-4 * (volts - 2.3)) + normal(m_random) * 2e-3 * scatter;
        r.frequencyStdHz = 2e-3 * scatter / 0.001 * 0.2;
        r.levelVrms = volts * (1.0 + 1e-5 * normal(m_random));
        r.levelDbfs = 20.0 * std::log10(volts / kFullScaleVrms);
        r.dcFs = 0.0008;
        r.peakFs = volts / kFullScaleVrms;
        double power = 0.0;
        for (int k = 2; k <= 10; ++k) {
            const bool isEven = k % 2 == 0;
            const double a = isEven ? 2e-6 : crossover(volts) * 0.72 / std::pow(k / 3.0, 0.8);
            const double b = clipping(volts) * (k == 2 ? 1.0 : 0.62) / std::pow(k / 2.0, 1.5);
            const double ratio = std::hypot(a, b) * (1.0 + scatter * normal(m_random));
            r.harmonics.push_back({k,
                                   k * *r.frequencyHz,
                                   ratio,
                                   isEven ? 90.0 : -98.0,
                                   k * *r.frequencyHz <= 20000.0});
            power += ratio * ratio;
        }
        const double noise = 1.8e-4;
        r.thdRatio = std::sqrt(power);
        r.thdnRatio = std::sqrt((power + noise * noise) / (1.0 + power + noise * noise));
        r.thdRRatio = *r.thdRatio / std::sqrt(1.0 + power + noise * noise);
        r.sinadDb = -20.0 * std::log10(*r.thdnRatio);
        r.snrDb = -20.0 * std::log10(noise);
        r.noiseDbfs = *r.levelDbfs - *r.snrDb;
        return r;
    }

    void keepBest(const core::Reading& full)
    {
        if (full.warnings.empty() && (!m_trend.best || *full.thdRatio < m_trend.best->thdRatio)) {
            m_trend.best = core::BestReading{full.startS + full.lengthS / 2.0,
                                             *full.thdRatio,
                                             full.thdnRatio,
                                             full.levelDbfs,
                                             full.levelVrms,
                                             full.frequencyHz};
        }
    }

    void addTrendPoint(const core::Reading& quick)
    {
        m_trend.points.push_back(
            {m_timeS, quick.thdRatio, quick.thdnRatio, quick.levelDbfs, false});
        while (m_trend.points.front().timeS < m_timeS - core::Trend::kSpanS) {
            m_trend.points.erase(m_trend.points.begin());
        }
    }

    std::shared_ptr<const core::SpectrumView> spectrum(const core::Reading& reading)
    {
        constexpr std::size_t kBins = 32769;
        std::exponential_distribution<float> power(1.0F);
        auto view = std::make_shared<core::SpectrumView>();
        view->binHz = m_rateHz / 2.0 / (kBins - 1);
        view->noiseBandwidthBins = 2.0;
        view->levelDbfs.reserve(kBins);
        for (std::size_t i = 0; i < kBins; ++i) {
            const double hz = static_cast<double>(i) * view->binHz;
            const double tilt = 8.0 * std::log10(1.0 + 300.0 / (hz + 5.0));
            view->levelDbfs.push_back(-136.0F + static_cast<float>(tilt) +
                                      10.0F * std::log10(power(m_random) + 1e-6F));
        }
        for (const double hum : {50.0, 100.0, 150.0, 250.0}) {
            addLine(*view, hum, -104.0 - hum / 25.0);
        }
        if (reading.levelDbfs) {
            addLine(*view, *reading.frequencyHz, *reading.levelDbfs);
            for (const core::HarmonicReading& harmonic : reading.harmonics) {
                addLine(*view,
                        harmonic.frequencyHz,
                        *reading.levelDbfs + 20.0 * std::log10(harmonic.ratio));
            }
        }
        return view;
    }

    /// A main lobe that falls by 12 dB a bin squared, five bins to either side.
    static void addLine(core::SpectrumView& view, double hz, double dbfs)
    {
        const double centre = hz / view.binHz;
        for (int i = -5; i <= 5; ++i) {
            const auto bin = static_cast<std::size_t>(std::max(0.0, std::round(centre) + i));
            if (bin < view.levelDbfs.size()) {
                const double off = static_cast<double>(bin) - centre;
                const auto level = static_cast<float>(dbfs - 5.0 * off * off);
                view.levelDbfs[bin] = std::max(view.levelDbfs[bin], level);
            }
        }
    }

    std::shared_ptr<const core::CycleView> cycle(const core::Reading& reading)
    {
        std::normal_distribution<double> normal(0.0, 1.0);
        auto view = std::make_shared<core::CycleView>();
        for (std::size_t i = 0; i < core::CycleView::kPoints; ++i) {
            const double theta =
                2.0 * std::numbers::pi * static_cast<double>(i) / core::CycleView::kPoints;
            double rest = 2e-6 * normal(m_random);
            for (const core::HarmonicReading& harmonic : reading.harmonics) {
                rest += harmonic.ratio * std::sin(harmonic.order * theta +
                                                  harmonic.phaseDeg * std::numbers::pi / 180.0);
            }
            view->residual[i] = static_cast<float>(rest);
            view->cycle[i] = static_cast<float>(std::sin(theta) + rest);
        }
        return view;
    }

    double m_rateHz;
    std::mt19937 m_random;
    std::uint64_t m_serial = 0;
    double m_timeS = 0.0;
    bool m_isHurried = false;
    double m_lastVolts = 0.0;
    double m_steadyS = 0.0;
    std::optional<core::Reading> m_full;
    core::TrendSnapshot m_trend;
};

} // namespace sinewright::tests

// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/meter.h"

#include "core/measure/cycle.h"
#include "core/measure/envelope.h"
#include "core/measure/figures.h"
#include "core/measure/overload.h"
#include "core/measure/stretch_workspace.h"
#include "core/measure/tone_blocks.h"
#include "core/measure/tone_search.h"
#include "core/signal/noise_level.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <complex>
#include <numbers>
#include <optional>
#include <vector>

namespace sinewright::core {

namespace {

using Complex = std::complex<double>;
constexpr double kPi = std::numbers::pi;

constexpr std::size_t kFewestSamples = 64;
constexpr double kFewestPeriods = 4.0;
constexpr double kPeriodsTolerance = 1e-3; ///< so that four periods to the sample are four
constexpr double kLowestToneHz = 10.0;     ///< below it is drift, not a tone to be read

// Power ratios. A tone stands 20 dB above the median density in one resolution bandwidth, and 15 dB
// above what lies beside it, for the crest of a slope is no tone; a strongest line 13 dB above the
// median or less needs no closer look.
constexpr double kToneProminence = 100.0;
constexpr double kLocalProminence = 30.0;
constexpr double kHopeless = 20.0;

/// That one strongest line of noise stands so high: more than a lifetime of readings.
constexpr double kLocalChance = 1e-8;

/// A line so far below the largest sample may be no more than rounding.
constexpr double kRounding = 1e-13;

constexpr double kRivalRatio = 0.5; ///< amplitude: a second line within 6 dB
constexpr double kDcOffset = 0.01;  ///< 1.0 = full scale

constexpr int kLowestHarmonicCount = 2;
constexpr int kHighestHarmonicCount = 32;

/// One measurement under way: the steps in their order, each needing the one before.
class Run
{
public:
    Run(std::span<const double> samples, SampleRate rate, const MeasureSettings& settings)
        : m_samples(samples)
        , m_settings(settings)
        , m_lengthS(static_cast<double>(samples.size()) / rate.hz)
    {
        m_settings.band.highHz = std::min(settings.band.highHz, rate.nyquist().value);
        m_settings.harmonicCount =
            std::clamp(settings.harmonicCount, kLowestHarmonicCount, kHighestHarmonicCount);
        m_result.reading.lengthS = m_lengthS;
    }

    Measurement measure(StretchWorkspace& workspace, bool withCycle)
    {
        Reading& reading = m_result.reading;
        reading.status = ReadingStatus::TooShort;
        m_statistics = sampleStatistics(m_samples);
        reading.dcFs = m_statistics.mean;
        reading.peakFs = m_statistics.peak;
        if (m_samples.size() >= kFewestSamples) {
            reading.status = readTone(workspace, withCycle);
        }
        warnOfSamples();
        std::ranges::sort(reading.warnings);
        return std::move(m_result);
    }

private:
    [[nodiscard]] double binsOf(double hz) const { return hz * m_lengthS; }
    [[nodiscard]] double hzOf(double bins) const { return bins / m_lengthS; }

    ReadingStatus readTone(StretchWorkspace& workspace, bool withCycle)
    {
        const auto count = static_cast<double>(m_samples.size());
        const auto search = [&](const StretchTransform& transform) {
            return strongestLine(transform,
                                 binsOf(kLowestToneHz),
                                 binsOf(m_settings.band.lowHz),
                                 binsOf(m_settings.band.highHz));
        };
        const auto termsFor = [count](double periods) {
            return static_cast<int>(
                std::clamp(std::floor(std::min(periods, count / 2.0 - periods) / 2.0),
                           static_cast<double>(StretchWorkspace::kFewestTerms),
                           static_cast<double>(StretchWorkspace::kMostTerms)));
        };
        int terms = StretchWorkspace::kMostTerms;
        auto transform = workspace.windowed(m_samples, m_statistics.mean, terms);
        auto line = search(transform);
        if (line.power > 0.0 && termsFor(line.bins) < StretchWorkspace::kMostTerms) {
            // Few periods: look through a narrow window first, then through the best that still parts the lines.
            transform =
                workspace.windowed(m_samples, m_statistics.mean, StretchWorkspace::kFewestTerms);
            line = search(transform);
            terms = termsFor(line.bins);
            if (terms != StretchWorkspace::kFewestTerms) {
                transform = workspace.windowed(m_samples, m_statistics.mean, terms);
            }
        }
        if (!(line.power > 0.0) || line.prominence < kHopeless) {
            return ReadingStatus::NoTone;
        }
        if (line.bins < kFewestPeriods - 0.5) {
            return line.prominence >= kToneProminence ? ReadingStatus::TooShort
                                                      : ReadingStatus::NoTone;
        }
        m_model = fitTone(transform, line.bins, m_settings.harmonicCount);
        if (m_model.periods < kFewestPeriods * (1.0 - kPeriodsTolerance)) {
            return ReadingStatus::TooShort;
        }
        if (!(std::abs(m_model.phasors[0]) > kRounding * m_statistics.peak)) {
            return ReadingStatus::NoTone;
        }
        std::shared_ptr<const CycleView> cycle;
        if (withCycle) {
            cycle = std::make_shared<const CycleView>(cycleOf(transform, m_model));
        }
        m_model.dc += m_statistics.mean;
        const auto status = readResidual(workspace, terms);
        if (status == ReadingStatus::Ok || status == ReadingStatus::Overload) {
            m_result.cycle = std::move(cycle);
        }
        return status;
    }

    ReadingStatus readResidual(StretchWorkspace& workspace, int terms)
    {
        const ToneBlocks blocks(m_model, m_samples.size());
        const auto phasors = blocks.fundamentalPhasors(m_samples);
        if (!isInEachQuarter(blocks.grid(), phasors)) {
            return ReadingStatus::NoTone;
        }
        // A polynomial of degree 2 g - 1 follows modulation within about g bins: as far as the gap reaches.
        const double gap = std::clamp(std::floor(m_model.periods / 2.0) - 1.0, 1.0, 3.0);
        const int degree =
            std::min(2 * static_cast<int>(gap) - 1, static_cast<int>(blocks.grid().blocks) - 1);
        const Envelope envelope(blocks.grid(), phasors, m_model.periods, degree);

        std::vector<double> lines(m_model.phasors.size());
        for (std::size_t line = 0; line < lines.size(); ++line) {
            lines[line] = m_model.periods * static_cast<double>(line + 1);
        }
        const auto spectrum =
            workspace.residual(m_samples, blocks, envelope, std::move(lines), gap);
        if (!isTone(spectrum, envelope.amplitude())) {
            return ReadingStatus::NoTone;
        }
        writeFigures({.lengthS = m_lengthS,
                      .settings = m_settings,
                      .model = m_model,
                      .envelope = envelope,
                      .residual = spectrum,
                      .phasorNoise = workspace.phasorNoise(terms)},
                     m_result.reading);
        return isAtFullScale(m_statistics) ||
                       isFlatTopped(m_statistics,
                                    envelope.amplitude(),
                                    static_cast<double>(m_samples.size()) / m_model.periods)
                   ? ReadingStatus::Overload
                   : ReadingStatus::Ok;
    }

    [[nodiscard]] bool isTone(const ResidualSpectrum& spectrum, double amplitude) const
    {
        const double power = amplitude * amplitude / 2.0;
        const double median =
            spectrum.medianPowerFs2(binsOf(m_settings.band.lowHz), binsOf(m_settings.band.highHz));
        // Beside it means within an octave: further off a slope of the noise would tell.
        const double periods = m_model.periods;
        const auto local = spectrum.localDensity(periods, periods / 2.0, 2.0 * periods);
        const double needed =
            local.independent > 0.0
                ? std::max(kLocalProminence, chanceRatio(kLocalChance, local.independent))
                : 0.0;
        return power > 0.0 && power >= kToneProminence * median &&
               power >= needed * local.powerFs2 && !hasRival(spectrum, amplitude);
    }

    /// A second line, no harmonic of the first, within 6 dB of it.
    [[nodiscard]] bool hasRival(const ResidualSpectrum& spectrum, double amplitude) const
    {
        const auto first = static_cast<std::size_t>(
            std::max(2.0, std::ceil(binsOf(kLowestToneHz) / (spectrum.position(1)))));
        // Between two bins a line shows a tenth of an amplitude less power than it has at the least.
        const double worthALook = 0.3 * kRivalRatio * kRivalRatio * amplitude * amplitude / 2.0;
        if (spectrum.largestPowerFs2() < worthALook) {
            return false;
        }
        for (std::size_t index = first; index + 2 < spectrum.size(); ++index) {
            if (spectrum.powerFs2(index) < worthALook) {
                continue;
            }
            if (spectrum.isNearMultiple(spectrum.position(index), 1.0)) {
                continue;
            }
            if (spectrum.lineAt(index).amplitude >= kRivalRatio * amplitude) {
                return true;
            }
        }
        return false;
    }

    void warnOfSamples()
    {
        Reading& reading = m_result.reading;
        if (reading.status == ReadingStatus::Overload || isAtFullScale(m_statistics)) {
            reading.warnings.push_back(Warning::InputOverload);
        }
        if (std::abs(*reading.dcFs) > kDcOffset) {
            reading.warnings.push_back(Warning::DcOffset);
        }
    }

    std::span<const double> m_samples;
    MeasureSettings m_settings;
    double m_lengthS;
    SampleStatistics m_statistics;
    ToneModel m_model;
    Measurement m_result;
};

/// Lengths kept ready: the quick and the full reading, and two that were used before.
constexpr std::size_t kKeptWorkspaces = 4;

} // namespace

Meter::Meter() = default;
Meter::~Meter() = default;

StretchWorkspace& Meter::workspaceFor(std::size_t samples)
{
    const auto found =
        std::ranges::find(m_workspaces, samples, [](const auto& kept) { return kept->samples(); });
    if (found != m_workspaces.end()) {
        std::rotate(found, found + 1, m_workspaces.end());
    } else {
        if (m_workspaces.size() == kKeptWorkspaces) {
            m_workspaces.erase(m_workspaces.begin());
        }
        m_workspaces.push_back(std::make_unique<StretchWorkspace>(samples));
    }
    return *m_workspaces.back();
}

Measurement Meter::measure(std::span<const double> samples,
                           SampleRate rate,
                           const MeasureSettings& settings,
                           bool withCycle)
{
    if (samples.empty()) {
        return {};
    }
    return Run(samples, rate, settings).measure(workspaceFor(samples.size()), withCycle);
}

} // namespace sinewright::core

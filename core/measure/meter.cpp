// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/meter.h"

#include "core/measure/cycle.h"
#include "core/measure/envelope.h"
#include "core/measure/hum.h"
#include "core/measure/line_fit.h"
#include "core/measure/overload.h"
#include "core/measure/residual_spectrum.h"
#include "core/measure/tone_blocks.h"
#include "core/measure/tone_search.h"
#include "core/signal/fourier.h"
#include "core/signal/weighting.h"
#include "core/signal/window.h"

#include <algorithm>
#include <array>
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

constexpr int kMostTerms = 9; ///< sidelobes of -234 dB
constexpr int kFewestTerms = 2;

constexpr double kToneProminence =
    100.0; ///< power ratio: 20 dB above the median density in one resolution bandwidth
constexpr double kLocalProminence =
    30.0; ///< and 15 dB above what lies beside it: the crest of a slope is no tone
constexpr double kHopeless =
    20.0; ///< a strongest line so little above the median needs no closer look
constexpr double kRivalRatio = 0.5; ///< amplitude: a second line within 6 dB

constexpr double kUnsteadyLevel = 0.01;
constexpr double kUnsteadyFrequency = 100e-6;
constexpr double kSignificantSigmas = 4.0;
constexpr double kDcOffset = 0.01;
constexpr double kNumericalNoise =
    1e-14; ///< of the fundamental: what lies below is rounding, not noise

constexpr int kLowestHarmonicCount = 2;
constexpr int kHighestHarmonicCount = 32;

/// The band in use [Hz].
struct BandEdges
{
    double lowHz = 0.0;
    double highHz = 0.0;
    [[nodiscard]] bool holds(double frequencyHz) const
    {
        return frequencyHz >= lowHz && frequencyHz <= highHz;
    }
};

/// Everything known of the tone when the reading is written.
struct ToneFindings
{
    ToneModel model;
    std::optional<Envelope> envelope;
    double samplePowerFs2 =
        0.0; ///< noise about the fundamental, as mean square of a sample were it white
    double phasorPowerFs2 = 0.0; ///< what that noise adds to a harmonic's squared rms
};

} // namespace

/// Plans, windows and buffers for one length.
struct Meter::Workspace
{
    std::size_t samples;
    RealFourier fourier;
    std::array<std::vector<double>, kMostTerms + 1>
        windows; ///< by number of terms, made when first needed
    std::vector<double> taper;
    double taperPower = 0.0;

    explicit Workspace(std::size_t count)
        : samples(count)
        , fourier(goodTransformLength(count))
        , taper(taperSamples(count))
    {
        for (const double w : taper) {
            taperPower += w * w;
        }
    }

    const std::vector<double>& window(int terms)
    {
        auto& window = windows[static_cast<std::size_t>(terms)];
        if (window.empty()) {
            window = windowSamples(minimumSidelobeWindow(terms), samples);
        }
        return window;
    }

    /// Windowed transform of the stretch less its mean.
    StretchTransform transform(std::span<const double> stretch, double mean, int terms)
    {
        const auto& weights = window(terms);
        const auto input = fourier.input();
        for (std::size_t n = 0; n < samples; ++n) {
            input[n] = (stretch[n] - mean) * weights[n];
        }
        std::fill(input.begin() + static_cast<std::ptrdiff_t>(samples), input.end(), 0.0);
        fourier.forward();
        return {fourier.output(), minimumSidelobeWindow(terms), samples};
    }
};

namespace {

/// One measurement under way: the steps in their order, each needing the one before.
class Run
{
public:
    Run(std::span<const double> samples, SampleRate rate, const MeasureSettings& settings)
        : m_samples(samples)
        , m_rate(rate)
        , m_settings(settings)
        , m_lengthS(static_cast<double>(samples.size()) / rate.hz)
        , m_band{settings.band.lowHz, std::min(settings.band.highHz, rate.nyquist().value)}
    {
        m_settings.harmonicCount =
            std::clamp(settings.harmonicCount, kLowestHarmonicCount, kHighestHarmonicCount);
        m_result.reading.lengthS = m_lengthS;
    }

    template <typename Workspace>
    Measurement measure(Workspace& workspace, bool withCycle)
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

    template <typename Workspace>
    ReadingStatus readTone(Workspace& workspace, bool withCycle)
    {
        const auto count = static_cast<double>(m_samples.size());
        const auto search = [&](const StretchTransform& transform) {
            return strongestLine(
                transform, binsOf(kLowestToneHz), binsOf(m_band.lowHz), binsOf(m_band.highHz));
        };
        const auto termsFor = [count](double periods) {
            return static_cast<int>(
                std::clamp(std::floor(std::min(periods, count / 2.0 - periods) / 2.0),
                           static_cast<double>(kFewestTerms),
                           static_cast<double>(kMostTerms)));
        };
        int terms = kMostTerms;
        auto transform = workspace.transform(m_samples, m_statistics.mean, terms);
        auto line = search(transform);
        if (line.power > 0.0 && termsFor(line.bins) < kMostTerms) {
            // Few periods: look through a narrow window first, then through the best that still parts the lines.
            transform = workspace.transform(m_samples, m_statistics.mean, kFewestTerms);
            line = search(transform);
            terms = termsFor(line.bins);
            if (terms != kFewestTerms) {
                transform = workspace.transform(m_samples, m_statistics.mean, terms);
            }
        }
        if (!(line.power > 0.0) || line.prominence < kHopeless) {
            return ReadingStatus::NoTone;
        }
        if (line.bins < kFewestPeriods - 0.5) {
            return line.prominence >= kToneProminence ? ReadingStatus::TooShort
                                                      : ReadingStatus::NoTone;
        }
        m_tone.model = fitTone(transform, line.bins, m_settings.harmonicCount);
        if (m_tone.model.periods < kFewestPeriods * (1.0 - kPeriodsTolerance)) {
            return ReadingStatus::TooShort;
        }
        if (!(std::abs(m_tone.model.phasors[0]) > 0.0)) {
            return ReadingStatus::NoTone;
        }
        std::shared_ptr<const CycleView> cycle;
        if (withCycle) {
            cycle = std::make_shared<const CycleView>(cycleOf(transform, m_tone.model));
        }
        m_tone.model.dc += m_statistics.mean;
        const auto status = readResidual(workspace, terms);
        if (status == ReadingStatus::Ok || status == ReadingStatus::Overload) {
            m_result.cycle = std::move(cycle);
        }
        return status;
    }

    template <typename Workspace>
    ReadingStatus readResidual(Workspace& workspace, int terms)
    {
        const ToneBlocks blocks(m_tone.model, m_samples.size());
        const auto phasors = blocks.fundamentalPhasors(m_samples);
        if (!isInEachQuarter(blocks.grid(), phasors)) {
            return ReadingStatus::NoTone;
        }
        // A polynomial of degree 2 g - 1 follows modulation within about g bins: as far as the gap reaches.
        const double gap = std::clamp(std::floor(m_tone.model.periods / 2.0) - 1.0, 1.0, 3.0);
        const int degree =
            std::min(2 * static_cast<int>(gap) - 1, static_cast<int>(blocks.grid().blocks) - 1);
        m_tone.envelope.emplace(blocks.grid(), phasors, m_tone.model.periods, degree);

        const auto input = workspace.fourier.input();
        const auto residual = input.first(m_samples.size());
        blocks.subtract(m_samples, *m_tone.envelope, residual);
        for (std::size_t n = 0; n < residual.size(); ++n) {
            residual[n] *= workspace.taper[n];
        }
        std::fill(input.begin() + static_cast<std::ptrdiff_t>(m_samples.size()), input.end(), 0.0);
        workspace.fourier.forward();
        std::vector<double> lines(m_tone.model.phasors.size());
        for (std::size_t line = 0; line < lines.size(); ++line) {
            lines[line] = m_tone.model.periods * static_cast<double>(line + 1);
        }
        const ResidualSpectrum spectrum(workspace.fourier.output(),
                                        m_samples.size(),
                                        workspace.taperPower,
                                        std::move(lines),
                                        gap);
        if (!isTone(spectrum)) {
            return ReadingStatus::NoTone;
        }
        weighNoise(spectrum, workspace.window(terms));
        writeTone();
        writeHarmonics();
        writeNoise(spectrum);
        writeHum(spectrum);
        return isAtFullScale(m_statistics) ||
                       isFlatTopped(m_statistics,
                                    m_tone.envelope->amplitude(),
                                    static_cast<double>(m_samples.size()) / m_tone.model.periods)
                   ? ReadingStatus::Overload
                   : ReadingStatus::Ok;
    }

    [[nodiscard]] bool isTone(const ResidualSpectrum& spectrum) const
    {
        const double amplitude = m_tone.envelope->amplitude();
        const double power = amplitude * amplitude / 2.0;
        const double median = spectrum.medianPowerFs2(binsOf(m_band.lowHz), binsOf(m_band.highHz));
        const double local = spectrum.localPowerFs2(m_tone.model.periods);
        return power > 0.0 && power >= kToneProminence * median &&
               power >= kLocalProminence * local && !hasRival(spectrum, amplitude);
    }

    /// A second line, no harmonic of the first, within 6 dB of it.
    [[nodiscard]] bool hasRival(const ResidualSpectrum& spectrum, double amplitude) const
    {
        const double periods = m_tone.model.periods;
        const auto first = static_cast<std::size_t>(
            std::max(2.0, std::ceil(binsOf(kLowestToneHz) / (spectrum.position(1)))));
        // Between two bins a line shows a tenth of an amplitude less power than it has at the least.
        const double worthALook = 0.3 * kRivalRatio * kRivalRatio * amplitude * amplitude / 2.0;
        for (std::size_t index = first; index + 2 < spectrum.size(); ++index) {
            if (spectrum.powerFs2(index) < worthALook) {
                continue;
            }
            const double order = std::max(1.0, std::round(spectrum.position(index) / periods));
            constexpr double kLobeBins = 2.0;
            if (std::abs(spectrum.position(index) - order * periods) <= kLobeBins ||
                spectrum.isInGap(spectrum.position(index), 1.0)) {
                continue;
            }
            if (spectrum.lineAt(index).amplitude >= kRivalRatio * amplitude) {
                return true;
            }
        }
        return false;
    }

    void weighNoise(const ResidualSpectrum& spectrum, std::span<const double> window)
    {
        const double local = spectrum.localPowerFs2(m_tone.model.periods);
        m_tone.samplePowerFs2 = local * static_cast<double>(spectrum.size() - 1);
        double squares = 0.0;
        double fourths = 0.0;
        for (const double w : window) {
            squares += w * w;
            fourths += w * w * w * w;
        }
        // Lines are projected on their lobes, which weighs the samples by the window's square; an amplitude's noise
        // is then 4 times the sample's by the sum of w^4 over (sum of w^2)^2, its squared rms half that.
        m_tone.phasorPowerFs2 = 2.0 * m_tone.samplePowerFs2 * fourths / (squares * squares);
    }

    void writeTone()
    {
        Reading& reading = m_result.reading;
        const Envelope& envelope = *m_tone.envelope;
        const double amplitude = envelope.amplitude();
        reading.dcFs = m_tone.model.dc;
        reading.frequencyHz = hzOf(envelope.periods());
        reading.levelDbfs = decibelsFromRatio(amplitude);
        if (m_settings.fullScaleVrms) {
            reading.levelVrms = amplitude * *m_settings.fullScaleVrms;
        }
        // Noise to signal of the mean amplitude; the Cramer-Rao bound of the frequency is sqrt 6 / pi times that, in
        // periods a stretch (Rife and Boorstyn 1974, from memory), and the least-squares coefficients of the second and
        // third Legendre polynomial scatter by sqrt 3 and sqrt 5 times sqrt 2 of it.
        const double relative =
            std::sqrt(m_tone.samplePowerFs2 / static_cast<double>(m_samples.size())) / amplitude;
        const double periodsStd = std::sqrt(6.0) / kPi * relative;
        const double changeStd = 6.0 * std::sqrt(10.0) / kPi * relative;
        const double levelStd = std::sqrt(4.0 * 6.0 + 2.25 * 10.0) * relative;
        const double change = std::abs(envelope.periodsChange());
        const bool isDrifting = change > kSignificantSigmas * changeStd;
        // Where the tone moves, the figure stands for a range: an even drift has the standard deviation of its width.
        const double drift = isDrifting ? change / std::sqrt(12.0) : 0.0;
        reading.frequencyStdHz = hzOf(std::hypot(periodsStd, drift));
        if (isDrifting && change > kUnsteadyFrequency * envelope.periods()) {
            reading.warnings.push_back(Warning::UnsteadyFrequency);
        }
        if (envelope.levelChange() > std::max(kUnsteadyLevel, kSignificantSigmas * levelStd)) {
            reading.warnings.push_back(Warning::UnsteadyLevel);
        }
    }

    void writeHarmonics()
    {
        Reading& reading = m_result.reading;
        const Complex first = m_tone.model.phasors[0];
        const Complex toSine = std::conj(first * Complex(0.0, 1.0)) / std::abs(first);
        Complex turn = toSine;
        double sum = 0.0;
        bool isAny = false;
        for (std::size_t line = 1; line < m_tone.model.phasors.size(); ++line) {
            turn *= toSine;
            HarmonicReading harmonic;
            harmonic.order = static_cast<int>(line + 1);
            harmonic.frequencyHz = harmonic.order * *reading.frequencyHz;
            harmonic.ratio = std::abs(m_tone.model.phasors[line]) / std::abs(first);
            const double phase = std::arg(m_tone.model.phasors[line] * turn * Complex(0.0, 1.0));
            harmonic.phaseDeg = phase <= -kPi ? 180.0 : phase * 180.0 / kPi;
            harmonic.inBand = m_band.holds(harmonic.frequencyHz);
            if (harmonic.inBand) {
                isAny = true;
                sum += harmonic.ratio * harmonic.ratio;
            }
            reading.harmonics.push_back(harmonic);
        }
        if (isAny) {
            reading.thdRatio = std::sqrt(sum);
        }
        if (*reading.frequencyHz * m_settings.harmonicCount > m_band.highHz) {
            reading.warnings.push_back(Warning::HarmonicsAboveBand);
        }
    }

    /// Harmonics in band [FS^2], weighted; what noise adds to each is taken off, for the noise is counted once already.
    [[nodiscard]] double harmonicPowerFs2(double fundamentalFs2, Weighting weighting) const
    {
        double sum = 0.0;
        for (const HarmonicReading& harmonic : m_result.reading.harmonics) {
            if (harmonic.inBand) {
                const double power =
                    harmonic.ratio * harmonic.ratio * fundamentalFs2 - m_tone.phasorPowerFs2;
                const double factor = weightingFactor(weighting, harmonic.frequencyHz);
                sum += std::max(power, 0.0) * factor * factor;
            }
        }
        return sum;
    }

    void writeNoise(const ResidualSpectrum& spectrum)
    {
        Reading& reading = m_result.reading;
        const auto noiseFs2 = [&](Weighting weighting) {
            return spectrum.bandPowerFs2(
                binsOf(m_band.lowHz), binsOf(m_band.highHz), weighting, hzOf(1.0));
        };
        const double amplitude = m_tone.envelope->amplitude();
        const double fundamental = amplitude * amplitude / 2.0;
        const double noise = noiseFs2(m_settings.weighting);
        if (noise > fundamental * kNumericalNoise * kNumericalNoise) {
            reading.noiseDbfs = dbfsFromRms(std::sqrt(noise));
            reading.snrDb = -decibelsFromRatio(std::sqrt(noise / fundamental));
        }
        if (!m_band.holds(*reading.frequencyHz)) {
            return; // the total of a band without the fundamental is no reference
        }
        const double factor = weightingFactor(m_settings.weighting, *reading.frequencyHz);
        const double rest = noise + harmonicPowerFs2(fundamental, m_settings.weighting);
        const double total = fundamental * factor * factor + rest;
        reading.thdnRatio = std::sqrt(rest / total);
        if (*reading.thdnRatio > 0.0) {
            reading.sinadDb = -decibelsFromRatio(*reading.thdnRatio);
        }
        if (reading.thdRatio) {
            const double plain = m_settings.weighting == Weighting::None
                                     ? total
                                     : fundamental + noiseFs2(Weighting::None) +
                                           harmonicPowerFs2(fundamental, Weighting::None);
            reading.thdRRatio = *reading.thdRatio * std::sqrt(fundamental / plain);
        }
    }

    void writeHum(const ResidualSpectrum& spectrum)
    {
        if (const auto hum = findHum(spectrum, hzOf(1.0))) {
            m_result.reading.mainsHumDbc =
                decibelsFromRatio(hum->amplitude / m_tone.envelope->amplitude());
            m_result.reading.warnings.push_back(Warning::MainsHum);
        }
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
    SampleRate m_rate;
    MeasureSettings m_settings;
    double m_lengthS;
    BandEdges m_band;
    SampleStatistics m_statistics;
    ToneFindings m_tone;
    Measurement m_result;
};

/// Lengths kept ready: the quick and the full reading, and two that were used before.
constexpr std::size_t kKeptWorkspaces = 4;

} // namespace

Meter::Meter() = default;
Meter::~Meter() = default;

Meter::Workspace& Meter::workspaceFor(std::size_t samples)
{
    const auto found =
        std::ranges::find(m_workspaces, samples, [](const auto& kept) { return kept->samples; });
    if (found != m_workspaces.end()) {
        std::rotate(found, found + 1, m_workspaces.end());
    } else {
        if (m_workspaces.size() == kKeptWorkspaces) {
            m_workspaces.erase(m_workspaces.begin());
        }
        m_workspaces.push_back(std::make_unique<Workspace>(samples));
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

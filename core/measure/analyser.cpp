// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/analyser.h"

#include "core/measure/meter.h"
#include "core/measure/sample_history.h"
#include "core/signal/spectrum.h"
#include "core/trim/trend.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <optional>
#include <utility>

#include <Eigen/Core>

namespace sinewright::core {

namespace {

constexpr double kQuickPeriods = 8.0; ///< of the tone, at least, in a quick reading
constexpr double kLowestToneHz = 10.0;

constexpr int kSpectrumTerms = 7; ///< sidelobes of -180 dB
constexpr std::size_t kSpectrumPoints = 16384;
constexpr double kShortSpectrumRateHz = 50000.0; ///< twice the points for each doubling above

std::size_t samplesIn(double seconds, SampleRate rate)
{
    return static_cast<std::size_t>(std::max(1.0, std::round(seconds * rate.hz)));
}

std::size_t spectrumPoints(SampleRate rate)
{
    const double doublings = std::ceil(std::log2(rate.hz / kShortSpectrumRateHz));
    return kSpectrumPoints << static_cast<unsigned>(std::max(0.0, doublings));
}

bool isUsable(const Reading& reading)
{
    return reading.status == ReadingStatus::Ok || reading.status == ReadingStatus::Overload;
}

} // namespace

class Analyser::Impl
{
public:
    explicit Impl(const AnalyserConfig& config)
        : m_config(config)
        , m_hop(samplesIn(config.quickEveryS, config.rate))
        , m_quickLength(samplesIn(config.quickLengthS, config.rate))
        , m_longestQuick(
              std::max(m_quickLength, samplesIn(kQuickPeriods / kLowestToneHz, config.rate)))
        , m_fullLength(samplesIn(config.fullLengthS, config.rate))
        , m_hopsAFull(std::max<std::size_t>(1, samplesIn(config.fullEveryS, config.rate) / m_hop))
        , m_history(std::max({m_longestQuick, m_fullLength, spectrumPoints(config.rate)}))
        , m_spectrum(minimumSidelobeWindow(kSpectrumTerms),
                     spectrumPoints(config.rate),
                     Spectrum::Dc::TakeOut)
        , m_wantedQuick(m_quickLength)
    {
        assert(config.rate.hz > 0.0);
    }

    std::vector<std::shared_ptr<const Frame>> feed(const Block& block)
    {
        std::vector<std::shared_ptr<const Frame>> frames;
        // A number that does not follow on the last block's is a gap, whether it is marked or not.
        const bool isBroken = m_hasBegun && block.firstFrame != m_position;
        const std::uint64_t skipped =
            isBroken && block.firstFrame > m_position ? block.firstFrame - m_position : 0;
        m_hasBegun = true;
        m_position = block.firstFrame;
        if (block.lostBefore > 0 || isBroken) {
            loseBefore(std::max(block.lostBefore, skipped));
        }
        auto rest = block.samples;
        while (!rest.empty()) {
            const auto isFinite = [](double x) {
                return std::isfinite(x);
            };
            const auto good =
                static_cast<std::size_t>(std::ranges::find_if_not(rest, isFinite) - rest.begin());
            take(rest.first(good), frames);
            rest = rest.subspan(good);
            const auto bad =
                static_cast<std::size_t>(std::ranges::find_if(rest, isFinite) - rest.begin());
            if (bad > 0) {
                m_position += bad;
                loseBefore(bad);
                rest = rest.subspan(bad);
            }
        }
        return frames;
    }

    void setSettings(const MeasureSettings& settings) { m_config.settings = settings; }

    void resetBest() { m_trend.resetBest(seconds(m_position)); }

private:
    [[nodiscard]] double seconds(std::uint64_t frames) const
    {
        return static_cast<double>(frames) / m_config.rate.hz;
    }

    /// Forgets all that a reading could span the gap with.
    void loseBefore(std::uint64_t frames)
    {
        m_framesLost += frames;
        // A run of bad samples that is cut by the end of a block is one gap all the same.
        m_gaps += m_sinceGap > 0 || m_gaps == 0 ? 1 : 0;
        m_history.clear();
        m_sinceGap = 0;
        m_hopsSinceFull = 0;
        m_full.reset();
        m_isAfterGap = true;
    }

    void take(std::span<const double> samples, std::vector<std::shared_ptr<const Frame>>& frames)
    {
        while (!samples.empty()) {
            const std::size_t toHop = m_hop - m_sinceGap % m_hop;
            const auto part = samples.first(std::min(toHop, samples.size()));
            samples = samples.subspan(part.size());
            m_history.append(part);
            m_position += part.size();
            m_sinceGap += part.size();
            for (const double x : part) {
                m_peak = std::max(m_peak, std::abs(x));
                m_squares += x * x;
            }
            m_metered += part.size();
            if (part.size() == toHop && m_sinceGap >= m_quickLength) {
                frames.push_back(makeFrame());
            }
        }
    }

    std::shared_ptr<const Frame> makeFrame()
    {
        auto frame = std::make_shared<Frame>();
        frame->serial = ++m_serial;
        frame->rate = m_config.rate;
        frame->timeS = seconds(m_position);
        frame->peakFs = m_peak;
        frame->rmsFs = std::sqrt(m_squares / static_cast<double>(m_metered));
        m_peak = 0.0;
        m_squares = 0.0;
        m_metered = 0;

        auto quick = readQuick();
        frame->quick = std::move(quick.reading);
        frame->cycle = std::move(quick.cycle);
        m_trend.addQuick(frame->quick, std::exchange(m_isAfterGap, false));
        frame->isFullNew = readFull();
        frame->full = m_full;
        frame->spectrum = takeSpectrum();
        frame->trend = std::make_shared<const TrendSnapshot>(m_trend.snapshot());
        frame->framesLost = m_framesLost;
        frame->gaps = m_gaps;
        return frame;
    }

    [[nodiscard]] Measurement measureNewest(std::size_t length, bool withCycle)
    {
        auto measurement =
            m_meter.measure(m_history.newest(length), m_config.rate, m_config.settings, withCycle);
        measurement.reading.startS = seconds(m_position - length);
        return measurement;
    }

    Measurement readQuick()
    {
        const auto available = [this](std::size_t length) {
            return std::min(length, m_history.size());
        };
        auto quick = measureNewest(available(m_wantedQuick), true);
        if (quick.reading.status == ReadingStatus::TooShort &&
            available(m_longestQuick) > m_wantedQuick) {
            quick = measureNewest(available(m_longestQuick), true);
        }
        m_wantedQuick = m_quickLength;
        if (isUsable(quick.reading)) {
            // In steps of half the usual length, so that a moving tone does not need new plans at every reading.
            const double wanted = kQuickPeriods / *quick.reading.frequencyHz * m_config.rate.hz;
            const std::size_t step = std::max<std::size_t>(1, m_quickLength / 2);
            while (static_cast<double>(m_wantedQuick) < wanted && m_wantedQuick < m_longestQuick) {
                m_wantedQuick += step;
            }
            m_wantedQuick = std::min(m_wantedQuick, m_longestQuick);
        }
        return quick;
    }

    bool readFull()
    {
        ++m_hopsSinceFull;
        if (m_sinceGap < m_fullLength || (m_full && m_hopsSinceFull < m_hopsAFull)) {
            return false;
        }
        m_hopsSinceFull = 0;
        m_full = measureNewest(m_fullLength, false).reading;
        m_trend.addFull(*m_full);
        return true;
    }

    std::shared_ptr<const SpectrumView> takeSpectrum()
    {
        if (m_history.size() < m_spectrum.count()) {
            return nullptr;
        }
        const auto power = m_spectrum.powerFs2(m_history.newest(m_spectrum.count()));
        auto view = std::make_shared<SpectrumView>();
        view->binHz = m_config.rate.hz / static_cast<double>(m_spectrum.count());
        view->noiseBandwidthBins = m_spectrum.noiseBandwidthBins();
        view->levelDbfs.resize(power.size());
        const auto size = static_cast<Eigen::Index>(power.size());
        // A full-scale sine has a power of 1/2 and reads 0 dBFS.
        const float floor = std::pow(10.0F, SpectrumView::kFloorDbfs / 10.0F);
        Eigen::Map<Eigen::ArrayXf>(view->levelDbfs.data(), size) =
            (Eigen::Map<const Eigen::ArrayXd>(power.data(), size) * 2.0)
                .cast<float>()
                .max(floor)
                .log10() *
            10.0F;
        return view;
    }

    // constant after construction, but for the settings
    AnalyserConfig m_config;
    std::size_t m_hop;
    std::size_t m_quickLength;
    std::size_t m_longestQuick;
    std::size_t m_fullLength;
    std::size_t m_hopsAFull;

    SampleHistory m_history;
    Meter m_meter;
    Spectrum m_spectrum;
    Trend m_trend;

    std::uint64_t m_position = 0; ///< number of the sample to come
    bool m_hasBegun = false;
    std::uint64_t m_sinceGap = 0; ///< samples since the start or the last gap
    std::size_t m_hopsSinceFull = 0;
    std::size_t m_wantedQuick;
    bool m_isAfterGap = false;
    std::optional<Reading> m_full;

    std::uint64_t m_serial = 0;
    std::uint64_t m_framesLost = 0;
    std::uint64_t m_gaps = 0;
    double m_peak = 0.0;
    double m_squares = 0.0;
    std::uint64_t m_metered = 0;
};

Analyser::Analyser(const AnalyserConfig& config) : m_impl(std::make_unique<Impl>(config)) {}

Analyser::~Analyser() = default;

std::vector<std::shared_ptr<const Frame>> Analyser::feed(const Block& block)
{
    return m_impl->feed(block);
}

void Analyser::setSettings(const MeasureSettings& settings)
{
    m_impl->setSettings(settings);
}

void Analyser::resetBest()
{
    m_impl->resetBest();
}

} // namespace sinewright::core

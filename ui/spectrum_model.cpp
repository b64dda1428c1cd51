// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/spectrum_model.h"

#include "core/units.h"
#include "ui/reading_choice.h"

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

namespace {

constexpr double kLowestShownHz = 20.0;
constexpr double kLowestShownForLowToneHz = 5.0;
constexpr double kLowToneHz = 40.0;
constexpr double kTopDb = 5.0; ///< a little room over 0 for the fundamental's number
constexpr double kFloorStepDb = 10.0;
constexpr double kRoomUnderNoiseDb = 20.0; ///< under the peaks of the noise
constexpr double kHighestFloorDb = -100.0;
constexpr double kLowestFloorDb = -200.0;

} // namespace

SpectrumModel::SpectrumModel(QObject* parent) : QObject(parent) {}

void SpectrumModel::setColumns(int columns)
{
    if (columns != m_columns) {
        m_columns = columns;
        rebuild();
    }
}

void SpectrumModel::setUnit(LevelUnit unit)
{
    if (unit != m_unit) {
        m_unit = unit;
        m_levelRange = {};
        rebuild();
    }
}

void SpectrumModel::setFrame(std::shared_ptr<const core::Frame> frame)
{
    m_frame = std::move(frame);
    rebuild();
}

void SpectrumModel::rebuild()
{
    m_highest.clear();
    m_lowest.clear();
    m_stems.clear();
    if (m_frame && m_frame->spectrum && m_columns > 0) {
        const core::Reading& reading = *shownReading(*m_frame).reading;
        const LevelUnit unit = reading.levelDbfs ? m_unit : LevelUnit::Dbfs;
        if (unit != m_shownUnit) {
            m_shownUnit = unit;
            m_levelRange = {};
        }
        const double tone = reading.frequencyHz.value_or(kLowToneHz);
        m_frequencyRange = {tone < kLowToneHz ? kLowestShownForLowToneHz : kLowestShownHz,
                            m_frame->rate.nyquist().value};
        rebuildColumns(unit == LevelUnit::Dbc ? -*reading.levelDbfs : 0.0);
        rebuildStems();
        chooseLevelRange();
    }
    emit changed();
}

void SpectrumModel::rebuildColumns(double offsetDb)
{
    const core::SpectrumView& view = *m_frame->spectrum;
    const std::size_t bins = view.levelDbfs.size();
    const double logLow = std::log(m_frequencyRange.low);
    const double perColumn = (std::log(m_frequencyRange.high) - logLow) / m_columns;
    // Never bin 0: a log axis has no place for DC.
    auto bin =
        std::max<std::size_t>(1, static_cast<std::size_t>(m_frequencyRange.low / view.binHz));
    for (int column = 0; column < m_columns && bin < bins; ++column) {
        const double endHz = std::exp(logLow + perColumn * (column + 1));
        const auto end = std::min(bins, static_cast<std::size_t>(std::ceil(endHz / view.binHz)));
        if (end <= bin) {
            continue;
        }
        const auto first = view.levelDbfs.begin() + static_cast<std::ptrdiff_t>(bin);
        const auto last = view.levelDbfs.begin() + static_cast<std::ptrdiff_t>(end);
        const auto [low, high] = std::minmax_element(first, last);
        const double hz = static_cast<double>(high - view.levelDbfs.begin()) * view.binHz;
        m_highest.emplace_back(hz, static_cast<double>(*high) + offsetDb);
        m_lowest.emplace_back(hz, static_cast<double>(*low) + offsetDb);
        bin = end;
    }
}

void SpectrumModel::rebuildStems()
{
    const core::Reading& reading = *shownReading(*m_frame).reading;
    if (!reading.frequencyHz || !reading.levelDbfs) {
        return;
    }
    const double carrierDb = m_shownUnit == LevelUnit::Dbc ? 0.0 : *reading.levelDbfs;
    m_stems.push_back({1, *reading.frequencyHz, carrierDb, true});
    for (const core::HarmonicReading& harmonic : reading.harmonics) {
        if (harmonic.ratio > 0.0) {
            m_stems.push_back({harmonic.order,
                               harmonic.frequencyHz,
                               carrierDb + core::decibelsFromRatio(harmonic.ratio),
                               harmonic.inBand});
        }
    }
}

void SpectrumModel::chooseLevelRange()
{
    std::vector<double> levels;
    levels.reserve(m_highest.size());
    for (const QPointF& point : m_highest) {
        levels.push_back(point.y());
    }
    if (levels.empty()) {
        return;
    }
    const auto middle = levels.begin() + static_cast<std::ptrdiff_t>(levels.size() / 2);
    std::nth_element(levels.begin(), middle, levels.end());
    const double noise = *middle - kRoomUnderNoiseDb;
    const double wanted = std::clamp(
        std::floor(noise / kFloorStepDb) * kFloorStepDb, kLowestFloorDb, kHighestFloorDb);
    const bool keeps = m_levelRange.span() > 0.0 &&
                       noise >= m_levelRange.low - kRoomUnderNoiseDb / 4.0 &&
                       wanted <= m_levelRange.low + 2.0 * kFloorStepDb;
    m_levelRange = {keeps ? m_levelRange.low : wanted, kTopDb};
}

} // namespace sinewright::ui

// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/bars_model.h"

#include "core/units.h"
#include "ui/reading_choice.h"

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

namespace {

constexpr double kStepDb = 20.0;
constexpr double kHighestFloorDbc = -120.0;
constexpr double kLowestFloorDbc = -200.0;

} // namespace

BarsModel::BarsModel(QObject* parent) : QObject(parent) {}

void BarsModel::setFrame(const std::shared_ptr<const core::Frame>& frame)
{
    m_bars.clear();
    if (frame) {
        double lowest = kHighestFloorDbc;
        for (const core::HarmonicReading& harmonic : shownReading(*frame).reading->harmonics) {
            HarmonicBar bar{harmonic.order, std::nullopt, harmonic.inBand};
            if (harmonic.ratio > 0.0) {
                bar.dbc = core::decibelsFromRatio(harmonic.ratio);
                lowest = std::min(lowest, *bar.dbc);
            }
            m_bars.push_back(bar);
        }
        const double wanted = std::max(std::floor(lowest / kStepDb) * kStepDb, kLowestFloorDbc);
        if (wanted < m_range.low || wanted > m_range.low + kStepDb) {
            m_range.low = wanted;
        }
    }
    emit changed();
}

} // namespace sinewright::ui

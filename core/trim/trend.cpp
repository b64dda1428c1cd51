// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/trim/trend.h"

#include <algorithm>
#include <utility>

namespace sinewright::core {

namespace {

double middleOf(const Reading& reading)
{
    return reading.startS + reading.lengthS / 2.0;
}

bool isSteady(const Reading& reading)
{
    return std::ranges::none_of(reading.warnings, [](Warning warning) {
        return warning == Warning::UnsteadyLevel || warning == Warning::UnsteadyFrequency;
    });
}

} // namespace

void Trend::addQuick(const Reading& reading, bool afterGap)
{
    const double timeS = middleOf(reading);
    m_isGapPending = m_isGapPending || afterGap;
    if (!m_points.empty() && timeS < m_points.back().timeS) {
        return; // a longer stretch than the last one, for a lower tone: its middle lies further back
    }
    if (!m_isGapPending && !m_points.empty() && timeS - m_points.back().timeS < kLeastSpacingS) {
        return;
    }
    m_points.push_back({.timeS = timeS,
                        .thdRatio = reading.thdRatio,
                        .thdnRatio = reading.thdnRatio,
                        .levelDbfs = reading.levelDbfs,
                        .afterGap = std::exchange(m_isGapPending, false)});
    while (m_points.front().timeS < timeS - kSpanS) {
        m_points.pop_front();
    }
}

void Trend::addFull(const Reading& reading)
{
    if (reading.status != ReadingStatus::Ok || !reading.thdRatio || !isSteady(reading) ||
        reading.startS < m_bestFromS || (m_best && m_best->thdRatio <= *reading.thdRatio)) {
        return;
    }
    m_best = BestReading{.timeS = middleOf(reading),
                         .thdRatio = *reading.thdRatio,
                         .thdnRatio = reading.thdnRatio,
                         .levelDbfs = reading.levelDbfs,
                         .levelVrms = reading.levelVrms,
                         .frequencyHz = reading.frequencyHz};
}

void Trend::resetBest(double fromS)
{
    m_best.reset();
    m_bestFromS = fromS;
}

TrendSnapshot Trend::snapshot() const
{
    return {std::vector<TrendPoint>(m_points.begin(), m_points.end()), m_best};
}

} // namespace sinewright::core

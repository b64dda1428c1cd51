// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/cycle_model.h"

#include "ui/range_choice.h"

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

namespace {

constexpr double kPercent = 100.0;
constexpr double kTurnDeg = 360.0;
constexpr double kLeastEndPercent = 1e-5;

} // namespace

CycleModel::CycleModel(QObject* parent) : QObject(parent) {}

void CycleModel::setFrame(const std::shared_ptr<const core::Frame>& frame)
{
    const auto view = frame ? frame->cycle : nullptr;
    if (view == m_view) {
        return;
    }
    m_view = view;
    m_residual.clear();
    m_cycle.clear();
    if (m_view) {
        double peak = kLeastEndPercent;
        for (int i = 0; i <= core::CycleView::kPoints; ++i) {
            const auto at = static_cast<std::size_t>(i % core::CycleView::kPoints);
            const double degrees = kTurnDeg * i / core::CycleView::kPoints;
            const double percent = static_cast<double>(m_view->residual[at]) * kPercent;
            m_residual.emplace_back(degrees, percent);
            m_cycle.emplace_back(degrees, static_cast<double>(m_view->cycle[at]));
            peak = std::max(peak, std::abs(percent));
        }
        m_residualEnd = symmetricEnd(peak, m_residualEnd);
    }
    emit changed();
}

} // namespace sinewright::ui

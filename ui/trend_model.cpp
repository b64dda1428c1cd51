// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/trend_model.h"

#include <algorithm>
#include <cmath>
#include <limits>

namespace sinewright::ui {

namespace {

constexpr double kPercent = 100.0;
constexpr double kLeastLevelSpanDb = 2.0;
constexpr double kFlatShare = 1.0 / 60.0; ///< of the level axis: a smaller step counts as flat
constexpr double kLeastPercent = 1e-7;    ///< keeps a log axis from a true zero

using Figure = std::optional<double> core::TrendPoint::*;

std::vector<QPointF>
lineOf(const core::TrendSnapshot& trend, Figure figure, double factor, double columnS)
{
    std::vector<QPointF> points;
    points.reserve(trend.points.size());
    for (const core::TrendPoint& point : trend.points) {
        if (point.afterGap && !points.empty()) {
            points.emplace_back(point.timeS, std::numeric_limits<double>::quiet_NaN());
        }
        const std::optional<double>& value = point.*figure;
        points.emplace_back(point.timeS,
                            value ? *value * factor : std::numeric_limits<double>::quiet_NaN());
    }
    return reduceToColumns(points, columnS);
}

std::optional<AxisRange> extremes(const std::vector<QPointF>& points)
{
    std::optional<AxisRange> result;
    for (const QPointF& point : points) {
        if (!std::isnan(point.y())) {
            result = result ? AxisRange{std::min(result->low, point.y()),
                                        std::max(result->high, point.y())}
                            : AxisRange{point.y(), point.y()};
        }
    }
    return result;
}

} // namespace

TrendModel::TrendModel(QObject* parent) : QObject(parent) {}

void TrendModel::setColumns(int columns)
{
    m_columns = columns;
}

void TrendModel::setFrame(std::shared_ptr<const core::Frame> frame)
{
    m_frame = std::move(frame);
    rebuild();
}

bool TrendModel::isEmpty() const
{
    const auto isFigure = [](const QPointF& point) {
        return !std::isnan(point.y());
    };
    return std::none_of(m_level.begin(), m_level.end(), isFigure) &&
           std::none_of(m_thd.begin(), m_thd.end(), isFigure);
}

AxisRange TrendModel::percentRange() const
{
    return m_percentRange.span() > 0.0 ? m_percentRange : AxisRange{0.01, 1.0};
}

AxisRange TrendModel::levelRange() const
{
    return m_levelRange.span() > 0.0 ? m_levelRange : AxisRange{-20.0, 0.0};
}

void TrendModel::rebuild()
{
    m_thd.clear();
    m_thdn.clear();
    m_level.clear();
    m_levelDashes.clear();
    m_best.reset();
    if (m_frame && m_frame->trend) {
        const auto& points = m_frame->trend->points;
        const double pastS = points.empty() ? 0.0 : m_frame->timeS - points.front().timeS;
        m_spanS = pastS > kShortSpanS ? core::Trend::kSpanS : kShortSpanS;
        const double columnS = m_spanS / std::max(1, m_columns);
        m_thd = lineOf(*m_frame->trend, &core::TrendPoint::thdRatio, kPercent, columnS);
        m_thdn = lineOf(*m_frame->trend, &core::TrendPoint::thdnRatio, kPercent, columnS);
        m_level = lineOf(*m_frame->trend, &core::TrendPoint::levelDbfs, 1.0, columnS);
        const double now = m_frame->timeS;
        if (m_frame->trend->best) {
            m_best = Best{std::max(0.0, now - m_frame->trend->best->timeS),
                          m_frame->trend->best->thdRatio * kPercent};
        }
        chooseRanges();
        m_levelDashes =
            dashed(m_level, columnS, kDashOn, kDashOff, m_levelRange.span() * kFlatShare);
        for (auto* line : {&m_thd, &m_thdn, &m_level, &m_levelDashes}) {
            for (QPointF& point : *line) {
                point.rx() -= now;
            }
        }
    }
    emit changed();
}

void TrendModel::chooseRanges()
{
    std::optional<AxisRange> percent = extremes(m_thd);
    if (const auto noise = extremes(m_thdn)) {
        percent = percent ? AxisRange{std::min(percent->low, noise->low),
                                      std::max(percent->high, noise->high)}
                          : noise;
    }
    if (m_best && percent) {
        percent->low = std::min(percent->low, m_best->percent);
        percent->high = std::max(percent->high, m_best->percent);
    }
    if (percent) {
        m_percentRange = logRange(std::max(percent->low, kLeastPercent),
                                  std::max(percent->high, kLeastPercent),
                                  m_percentRange);
    }
    if (const auto level = extremes(m_level)) {
        m_levelRange = linearRange(level->low, level->high, kLeastLevelSpanDb, m_levelRange);
    }
}

} // namespace sinewright::ui

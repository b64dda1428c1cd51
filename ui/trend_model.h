// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "ui/range_choice.h"

#include <QObject>
#include <QPointF>

#include <memory>
#include <optional>
#include <vector>

namespace sinewright::ui {

/// The trim trend as it is drawn: extremes per pixel column, time counted back from now, and the ranges.
class TrendModel final : public QObject
{
    Q_OBJECT
public:
    static constexpr double kShortSpanS = 60.0;
    static constexpr int kDashOn = 4; ///< the level's dashes [columns]
    static constexpr int kDashOff = 3;

    /// Where the best so far lies. Older than the trend's span is well possible.
    struct Best
    {
        double agoS = 0.0; ///< [s] >= 0
        double percent = 0.0;
    };

    explicit TrendModel(QObject* parent = nullptr);

    void setColumns(int columns);
    void setFrame(std::shared_ptr<const core::Frame> frame);

    /// How much of the past the time axis shows [s]: a minute until there is more, then the whole trend.
    [[nodiscard]] double spanS() const { return m_spanS; }
    /// Not one figure in it.
    [[nodiscard]] bool isEmpty() const;
    /// x [s] -span .. 0, y [%]; a NaN y parts the line: no figure there, or samples were lost.
    [[nodiscard]] const std::vector<QPointF>& thd() const { return m_thd; }
    [[nodiscard]] const std::vector<QPointF>& thdn() const { return m_thdn; }
    /// y [dBFS]
    [[nodiscard]] const std::vector<QPointF>& level() const { return m_level; }
    /// The level as the dashes it is drawn with.
    [[nodiscard]] const std::vector<QPointF>& levelDashes() const { return m_levelDashes; }
    [[nodiscard]] const std::optional<Best>& best() const { return m_best; }
    /// The last ranges chosen stay when the trend is empty; at the start 0.01 .. 1 % and -20 .. 0 dBFS.
    [[nodiscard]] AxisRange percentRange() const;
    [[nodiscard]] AxisRange levelRange() const;

signals:
    void changed();

private:
    void rebuild();
    void chooseRanges();

    int m_columns = 0;
    double m_spanS = kShortSpanS;
    std::shared_ptr<const core::Frame> m_frame;
    std::vector<QPointF> m_thd;
    std::vector<QPointF> m_thdn;
    std::vector<QPointF> m_level;
    std::vector<QPointF> m_levelDashes;
    std::optional<Best> m_best;
    AxisRange m_percentRange;
    AxisRange m_levelRange;
};

} // namespace sinewright::ui

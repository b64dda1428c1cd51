// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "ui/range_choice.h"

#include <QObject>

#include <memory>
#include <optional>
#include <vector>

namespace sinewright::ui {

/// One harmonic's bar. Without a level (nothing found) there is a place for it but no bar.
struct HarmonicBar
{
    int order = 2;
    std::optional<double> dbc;
    bool inBand = true; ///< drawn hollow when false: it does not count for THD
};

/// The harmonic bars: which rows there are, how high, on which axis.
class BarsModel final : public QObject
{
    Q_OBJECT
public:
    explicit BarsModel(QObject* parent = nullptr);

    void setFrame(const std::shared_ptr<const core::Frame>& frame);

    [[nodiscard]] bool isEmpty() const { return m_bars.empty(); }
    [[nodiscard]] const std::vector<HarmonicBar>& bars() const { return m_bars; }
    [[nodiscard]] AxisRange range() const { return m_range; } ///< [dBc]

signals:
    void changed();

private:
    std::vector<HarmonicBar> m_bars;
    AxisRange m_range{-140.0, 0.0};
};

} // namespace sinewright::ui

// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QPointF>

#include <vector>

namespace sinewright::ui {

/// What an axis covers.
struct AxisRange
{
    double low = 0.0;
    double high = 0.0;
    [[nodiscard]] double span() const { return high - low; }
    friend bool operator==(const AxisRange&, const AxisRange&) = default;
};

// Each of these keeps `current` as long as the data fit in it and do not leave most of it empty: an axis that jumps
// cannot be read. A current range without a span is replaced.

/// Range of a log axis in steps of 1, 2, 5, a decade at least. @param lowest, highest  > 0.
[[nodiscard]] AxisRange logRange(double lowest, double highest, AxisRange current);

/// Range of a linear axis, ends on multiples of 1, 2 or 5, `leastSpan` at least.
[[nodiscard]] AxisRange
linearRange(double lowest, double highest, double leastSpan, AxisRange current);

/// Upper end of a symmetric axis that holds `peak` (> 0) with a little room, from the series 1, 2, 5.
[[nodiscard]] double symmetricEnd(double peak, double current);

/// Next value of the series 1, 2, 5, 10, ... at or above / at or below `value` (> 0).
[[nodiscard]] double stepAbove(double value);
[[nodiscard]] double stepBelow(double value);

/// The least and greatest value of every column of `columnWidth` along x, in their order; NaN points part the line
/// and are kept. Columns lie at multiples of the width, so that a scrolling trace keeps its shape.
[[nodiscard]] std::vector<QPointF> reduceToColumns(const std::vector<QPointF>& points,
                                                   double columnWidth);

/// The same line as dashes of `on` columns with `off` between, parted by NaN points: a pen with a dash pattern costs
/// a multiple of a plain one. Dashes keep their place along x; where the line steps by more than `flat` it is whole.
[[nodiscard]] std::vector<QPointF>
dashed(const std::vector<QPointF>& points, double columnWidth, int on, int off, double flat);

} // namespace sinewright::ui

// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/range_choice.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

namespace sinewright::ui {

namespace {

constexpr std::array<double, 3> kSteps{1.0, 2.0, 5.0};
constexpr double kDecade = 10.0;
constexpr double kSlack =
    1e-9; ///< relative; a value that is a step but for rounding counts as that step
constexpr double kRoom = 1.15; ///< free space that a range leaves beyond the data, as a factor
constexpr double kLeastFilled = 0.3; ///< of a symmetric axis
constexpr double kLoose = 2.5;       ///< a range so many times too wide is chosen anew

bool fits(AxisRange inner, AxisRange outer)
{
    return outer.span() > 0.0 && inner.low >= outer.low && inner.high <= outer.high;
}

} // namespace

double stepAbove(double value)
{
    const double decade = std::pow(kDecade, std::floor(std::log10(value)));
    for (const double step : kSteps) {
        if (step * decade >= value * (1.0 - kSlack)) {
            return step * decade;
        }
    }
    return kDecade * decade;
}

double stepBelow(double value)
{
    const double decade = std::pow(kDecade, std::floor(std::log10(value) + kSlack));
    double result = decade;
    for (const double step : kSteps) {
        if (step * decade <= value * (1.0 + kSlack)) {
            result = step * decade;
        }
    }
    return result;
}

AxisRange logRange(double lowest, double highest, AxisRange current)
{
    AxisRange wanted{stepBelow(lowest / kRoom), stepAbove(highest * kRoom)};
    if (wanted.high / wanted.low < kDecade * (1.0 - kSlack)) {
        const double middle = std::sqrt(wanted.low * wanted.high);
        wanted.low = stepBelow(middle / std::sqrt(kDecade));
        wanted.high = std::max(wanted.high, wanted.low * kDecade);
    }
    const bool keeps =
        current.low > 0.0 && fits({lowest, highest}, current) &&
        std::log(current.high / current.low) < kLoose * std::log(wanted.high / wanted.low);
    return keeps ? current : wanted;
}

AxisRange linearRange(double lowest, double highest, double leastSpan, AxisRange current)
{
    const double span = std::max(highest - lowest, leastSpan / kRoom) * kRoom;
    const double middle = (lowest + highest) / 2.0;
    const double step = stepAbove(span / kDecade) * 2.0;
    const AxisRange wanted{std::floor((middle - span / 2.0) / step) * step,
                           std::ceil((middle + span / 2.0) / step) * step};
    const bool keeps = fits({lowest, highest}, current) && current.span() < kLoose * wanted.span();
    return keeps ? current : wanted;
}

double symmetricEnd(double peak, double current)
{
    const double wanted = stepAbove(peak * kRoom);
    return peak <= current && peak >= kLeastFilled * current ? current : wanted;
}

std::vector<QPointF> reduceToColumns(const std::vector<QPointF>& points, double columnWidth)
{
    std::vector<QPointF> result;
    std::size_t i = 0;
    while (i < points.size()) {
        if (std::isnan(points[i].y())) {
            result.push_back(points[i++]);
            continue;
        }
        const double column = std::floor(points[i].x() / columnWidth);
        std::size_t low = i;
        std::size_t high = i;
        for (; i < points.size() && !std::isnan(points[i].y()) &&
               std::floor(points[i].x() / columnWidth) <= column;
             ++i) {
            low = points[i].y() < points[low].y() ? i : low;
            high = points[i].y() > points[high].y() ? i : high;
        }
        result.push_back(points[std::min(low, high)]);
        if (low != high) {
            result.push_back(points[std::max(low, high)]);
        }
    }
    return result;
}

std::vector<QPointF>
dashed(const std::vector<QPointF>& points, double columnWidth, int on, int off, double flat)
{
    std::vector<QPointF> result;
    result.reserve(points.size());
    bool isParted = true;
    for (std::size_t i = 0; i < points.size(); ++i) {
        const double column = std::floor(points[i].x() / columnWidth);
        const double place = column - std::floor(column / (on + off)) * (on + off);
        const bool isStep =
            (i > 0 && std::abs(points[i].y() - points[i - 1].y()) > flat) ||
            (i + 1 < points.size() && std::abs(points[i + 1].y() - points[i].y()) > flat);
        if (place < on || isStep) {
            result.push_back(points[i]);
            isParted = false;
        } else if (!isParted) {
            result.emplace_back(points[i].x(), std::numeric_limits<double>::quiet_NaN());
            isParted = true;
        }
    }
    return result;
}

} // namespace sinewright::ui

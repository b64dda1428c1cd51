// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/tickers.h"

#include "ui/figure_text.h"
#include "ui/range_choice.h"

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

namespace {

constexpr double kSlack = 1e-9;       ///< relative; rounding of a range's end
constexpr double kWholeDecade = 1e-6; ///< how near a whole number the logarithm of a ten lies
constexpr double kPastTick = 1.01;    ///< factor that leaves a tick behind but not the next

} // namespace

NumberTicker::NumberTicker(double step, int count) : m_step(step)
{
    setTickCount(count);
}

double NumberTicker::getTickStep(const QCPRange& range)
{
    m_shownStep = m_step > 0.0 ? m_step : stepAbove(range.size() / std::max(1, tickCount()));
    return m_shownStep;
}

int NumberTicker::getSubTickCount(double /*tickStep*/)
{
    return 0;
}

QString NumberTicker::getTickLabel(double tick,
                                   const QLocale& /*locale*/,
                                   QChar /*format*/,
                                   int /*precision*/)
{
    const int decimals = std::max(0, -static_cast<int>(std::floor(std::log10(m_shownStep) + 1e-9)));
    return numberText(tick, decimals);
}

StepTicker::StepTicker(Label label, double roomiestDecades)
    : m_label(std::move(label))
    , m_roomiestDecades(roomiestDecades)
{}

QVector<double> StepTicker::createTickVector(double /*tickStep*/, const QCPRange& range)
{
    QVector<double> ticks;
    if (!(range.lower > 0.0) || !(range.upper > range.lower)) {
        return ticks;
    }
    const bool isRoomy = std::log10(range.upper / range.lower) <= m_roomiestDecades;
    double tick = stepAbove(range.lower);
    while (tick <= range.upper * (1.0 + kSlack)) {
        const double decades = std::log10(tick);
        if (isRoomy || std::abs(decades - std::round(decades)) < kWholeDecade) {
            ticks.append(tick);
        }
        tick = stepAbove(tick * kPastTick);
    }
    return ticks;
}

int StepTicker::getSubTickCount(double /*tickStep*/)
{
    return 0;
}

QString StepTicker::getTickLabel(double tick,
                                 const QLocale& /*locale*/,
                                 QChar /*format*/,
                                 int /*precision*/)
{
    return m_label(tick);
}

} // namespace sinewright::ui

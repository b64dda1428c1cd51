// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/tickers.h"

#include "ui/figure_text.h"
#include "ui/range_choice.h"

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

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
    for (double tick = stepAbove(range.lower); tick <= range.upper * (1.0 + 1e-9);
         tick = stepAbove(tick * 1.01)) {
        const double decades = std::log10(tick);
        if (isRoomy || std::abs(decades - std::round(decades)) < 1e-6) {
            ticks.append(tick);
        }
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

// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <qcustomplot.h>

#include <functional>

namespace sinewright::ui {

/// Evenly spaced round numbers, set with a true minus sign.
class NumberTicker final : public QCPAxisTicker
{
public:
    /// @param step  distance of the ticks; 0 lets the axis choose about `count` of them.
    explicit NumberTicker(double step = 0.0, int count = 5);
    void setStep(double step) { m_step = step; }

protected:
    double getTickStep(const QCPRange& range) override;
    int getSubTickCount(double tickStep) override;
    QString getTickLabel(double tick, const QLocale& locale, QChar format, int precision) override;

private:
    double m_step;
    double m_shownStep = 1.0;
};

/// 1, 2, 5, 10, ... along a log axis; only the tens when the axis is short for more.
class StepTicker final : public QCPAxisTicker
{
public:
    using Label = std::function<QString(double)>;
    /// @param roomiestDecades  with more decades than this on the axis only the tens are ticked.
    StepTicker(Label label, double roomiestDecades);
    void setRoomiestDecades(double decades) { m_roomiestDecades = decades; }

protected:
    QVector<double> createTickVector(double tickStep, const QCPRange& range) override;
    int getSubTickCount(double tickStep) override;
    QString getTickLabel(double tick, const QLocale& locale, QChar format, int precision) override;

private:
    Label m_label;
    double m_roomiestDecades;
};

} // namespace sinewright::ui

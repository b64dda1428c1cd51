// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/advice_label.h"
#include "ui/bench_page.h"
#include "ui/figure_text.h"

#include <QElapsedTimer>

namespace sinewright::ui {

class TrendPlot;

/// THD to be read from across the bench, a third of the window high.
class GreatFigure final : public QWidget
{
    Q_OBJECT
public:
    explicit GreatFigure(QWidget* parent = nullptr);
    void setTheme(const Theme& theme);
    void setFigure(const FigureText& figure);
    [[nodiscard]] const FigureText& figure() const { return m_figure; }
    /// Height of the digits as they are drawn now [logical pixels].
    [[nodiscard]] double digitHeight() const;

protected:
    void paintEvent(QPaintEvent* event) override;

private:
    [[nodiscard]] int fontPixels() const;

    const Theme* m_theme;
    FigureText m_figure;
};

/// The full-screen view: THD, the advice line, the trend; nothing else.
class ArmsLengthView final : public BenchPage
{
    Q_OBJECT
public:
    explicit ArmsLengthView(QWidget* parent = nullptr);

    void showFrame(const std::shared_ptr<const core::Frame>& frame) override;
    void hurry() override { m_sinceShown.invalidate(); }
    void setTheme(const Theme& theme) override;
    [[nodiscard]] QList<Plot*> plots() const override;
    void setAdvice(const QString& sentence, bool isAlert);
    [[nodiscard]] const GreatFigure& great() const { return *m_great; }

protected:
    void resizeEvent(QResizeEvent* event) override;

private:
    GreatFigure* m_great;
    AdviceLabel* m_advice;
    TrendPlot* m_trend;
    QElapsedTimer m_sinceShown;
};

} // namespace sinewright::ui

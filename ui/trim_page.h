// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/bench_page.h"
#include "ui/spectrum_model.h"

namespace sinewright::ui {

class BarsPlot;
class CyclePlot;
class FiguresColumn;
class SpectrumPlot;
class TrendPlot;
class Trimmer;

/// The main page: trim trend, spectrum, harmonic bars, cycle residual and the running figures.
class TrimPage final : public BenchPage
{
    Q_OBJECT
public:
    explicit TrimPage(QWidget* parent = nullptr);

    void showFrame(const std::shared_ptr<const core::Frame>& frame) override;
    void hurry() override;
    void showBench(const BenchState& state) override;
    void setTheme(const Theme& theme) override;
    [[nodiscard]] QList<Plot*> plots() const override;

    void setSpectrumUnit(LevelUnit unit);
    [[nodiscard]] Trimmer& trimmer() { return *m_trimmer; }

private:
    TrendPlot* m_trend;
    SpectrumPlot* m_spectrum;
    BarsPlot* m_bars;
    CyclePlot* m_cycle;
    FiguresColumn* m_figures;
    Trimmer* m_trimmer;
    QWidget* m_trimmerRule;
};

} // namespace sinewright::ui

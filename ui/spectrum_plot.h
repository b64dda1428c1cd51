// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/plot.h"
#include "ui/spectrum_model.h"
#include "ui/tickers.h"

namespace sinewright::ui {

/// Spectrum over log frequency with the fundamental and its harmonics as numbered stems.
class SpectrumPlot final : public Plot
{
    Q_OBJECT
public:
    explicit SpectrumPlot(QWidget* parent = nullptr);

    void setFrame(std::shared_ptr<const core::Frame> frame);
    void setUnit(LevelUnit unit);
    [[nodiscard]] const SpectrumModel& model() const { return m_model; }

protected:
    void restyle() override;
    void resizeEvent(QResizeEvent* event) override;

private:
    void present();
    void paintStems(QCPPainter& painter) const;

    SpectrumModel m_model;
    QSharedPointer<StepTicker> m_frequencies;
    QCPGraph* m_lowest;
    QCPGraph* m_highest;
};

} // namespace sinewright::ui

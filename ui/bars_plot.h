// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/bars_model.h"
#include "ui/plot.h"
#include "ui/tickers.h"

namespace sinewright::ui {

/// Harmonics as bars over a dBc axis, each with its level on top; hollow where it lies above the band.
class BarsPlot final : public Plot
{
    Q_OBJECT
public:
    explicit BarsPlot(QWidget* parent = nullptr);

    void setFrame(const std::shared_ptr<const core::Frame>& frame);
    [[nodiscard]] const BarsModel& model() const { return m_model; }

protected:
    void restyle() override;

private:
    void present();
    void paintBars(QCPPainter& painter) const;

    BarsModel m_model;
    QSharedPointer<NumberTicker> m_orders;
};

} // namespace sinewright::ui

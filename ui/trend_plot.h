// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/plot.h"
#include "ui/trend_model.h"

namespace sinewright::ui {

/// THD and THD+N on a log axis, level on its own, over the last three minutes; the best so far as a rule.
class TrendPlot final : public Plot
{
    Q_OBJECT
public:
    explicit TrendPlot(QWidget* parent = nullptr);

    void setFrame(std::shared_ptr<const core::Frame> frame);
    [[nodiscard]] const TrendModel& model() const { return m_model; }

protected:
    void restyle() override;
    void resizeEvent(QResizeEvent* event) override;

private:
    void present();
    void setSpan(double seconds);
    void paintBest(QCPPainter& painter) const;
    void paintNow(QCPPainter& painter) const;

    TrendModel m_model;
    double m_spanS = 0.0;
    QCPGraph* m_level; // drawn in this order
    QCPGraph* m_thdn;
    QCPGraph* m_thd;
};

} // namespace sinewright::ui

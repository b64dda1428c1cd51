// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/cycle_model.h"
#include "ui/plot.h"

namespace sinewright::ui {

/// What is left over one cycle once the fundamental is taken out; the averaged cycle stands faint behind it.
class CyclePlot final : public Plot
{
    Q_OBJECT
public:
    explicit CyclePlot(QWidget* parent = nullptr);

    void setFrame(const std::shared_ptr<const core::Frame>& frame);
    [[nodiscard]] const CycleModel& model() const { return m_model; }

protected:
    void restyle() override;

private:
    void present();

    CycleModel m_model;
    QCPGraph* m_cycle;
    QCPGraph* m_residual;
};

} // namespace sinewright::ui

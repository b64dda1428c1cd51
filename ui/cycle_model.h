// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"

#include <QObject>
#include <QPointF>

#include <memory>
#include <vector>

namespace sinewright::ui {

/// The cycle residual as it is drawn: percent of the fundamental against degrees, closed at 360.
class CycleModel final : public QObject
{
    Q_OBJECT
public:
    explicit CycleModel(QObject* parent = nullptr);

    void setFrame(const std::shared_ptr<const core::Frame>& frame);

    [[nodiscard]] bool isEmpty() const { return m_residual.empty(); }
    [[nodiscard]] const std::vector<QPointF>& residual() const
    {
        return m_residual;
    } ///< x [degree], y [%]
    [[nodiscard]] const std::vector<QPointF>& cycle() const
    {
        return m_cycle;
    } ///< x [degree], y 1 = fundamental
    [[nodiscard]] double residualEnd() const
    {
        return m_residualEnd > 0.0 ? m_residualEnd : 1.0;
    } ///< the axis is -end .. end [%]

signals:
    void changed();

private:
    std::shared_ptr<const core::CycleView> m_view;
    std::vector<QPointF> m_residual;
    std::vector<QPointF> m_cycle;
    double m_residualEnd = 0.0;
};

} // namespace sinewright::ui

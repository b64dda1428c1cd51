// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "ui/bench_state.h"
#include "ui/theme.h"

#include <QList>
#include <QWidget>

#include <memory>

namespace sinewright::ui {

class Plot;

/// What every page of the window can be told. Only the page that is seen is told frames.
class BenchPage : public QWidget
{
    Q_OBJECT
public:
    using QWidget::QWidget;

    /// @param frame  null: there is nothing yet.
    virtual void showFrame(const std::shared_ptr<const core::Frame>& frame)
    {
        static_cast<void>(frame);
    }
    /// The next frame renews even the figures that otherwise change a few times a second, for a picture is to be taken.
    virtual void hurry() {}
    virtual void showBench(const BenchState& state) { static_cast<void>(state); }
    virtual void setTheme(const Theme& theme) { static_cast<void>(theme); }
    /// The plots on it, for pictures and for the pace of drawing.
    [[nodiscard]] virtual QList<Plot*> plots() const { return {}; }
};

} // namespace sinewright::ui

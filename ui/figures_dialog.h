// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QDialog>

namespace sinewright::ui {

class FiguresModel;

/// Every figure of the shown reading in a table that stays live.
class FiguresDialog final : public QDialog
{
    Q_OBJECT
public:
    FiguresDialog(FiguresModel& figures, QWidget* parent);
};

} // namespace sinewright::ui

// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/actions.h"

#include <QDialog>

namespace sinewright::ui {

/// All keys, made from the actions themselves.
class KeysDialog final : public QDialog
{
    Q_OBJECT
public:
    KeysDialog(const QList<ActionGroup>& groups, QWidget* parent);
};

} // namespace sinewright::ui

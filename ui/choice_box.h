// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QComboBox>

namespace sinewright::ui {

/// A choice box set as a line of text with a small hook that says it opens; it says so before it does.
class ChoiceBox final : public QComboBox
{
    Q_OBJECT
public:
    using QComboBox::QComboBox;
    void showPopup() override;

signals:
    void aboutToOpen();

protected:
    void paintEvent(QPaintEvent* event) override;
};

} // namespace sinewright::ui

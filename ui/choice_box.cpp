// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/choice_box.h"

#include <QPainter>

namespace sinewright::ui {

void ChoiceBox::showPopup()
{
    emit aboutToOpen();
    QComboBox::showPopup();
}

void ChoiceBox::paintEvent(QPaintEvent* event)
{
    constexpr double kHalfWidth = 4.0;
    constexpr double kFromRight = 10.0;
    QComboBox::paintEvent(event);
    if (!isEnabled()) {
        return;
    }
    QPainter painter(this);
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setPen(QPen(palette().color(QPalette::PlaceholderText), 1.4));
    const QPointF tip(width() - kFromRight, height() / 2.0 + kHalfWidth / 2.0);
    painter.drawPolyline(QPolygonF(
        {tip + QPointF(-kHalfWidth, -kHalfWidth), tip, tip + QPointF(kHalfWidth, -kHalfWidth)}));
}

} // namespace sinewright::ui

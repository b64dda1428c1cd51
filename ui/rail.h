// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/theme.h"

#include <QAbstractButton>
#include <QAction>
#include <QList>
#include <QWidget>

class QVBoxLayout;

namespace sinewright::ui {

/// An action set as a line of the rail: pages large with their number in the order of the job, the rest small with
/// the key that does the same.
class RailButton final : public QAbstractButton
{
    Q_OBJECT
public:
    /// @param number  of the page, from 1; 0 for anything else.
    RailButton(QAction* action, int number, QWidget* parent);

    void setTheme(const Theme& theme);
    [[nodiscard]] QSize sizeHint() const override;

protected:
    void paintEvent(QPaintEvent* event) override;
    void enterEvent(QEnterEvent* event) override;
    void leaveEvent(QEvent* event) override;

private:
    void follow();
    void paintPage(QPainter& painter) const;
    void paintCommand(QPainter& painter) const;

    QAction* m_action;
    int m_number;
    const Theme* m_theme;
};

/// The left rail: the five pages above, what one wants at hand on any page below.
class Rail final : public QWidget
{
    Q_OBJECT
public:
    Rail(const QList<QAction*>& pages, const QList<QAction*>& commands, QWidget* parent);
    void setTheme(const Theme& theme);

private:
    QList<RailButton*> m_buttons;
};

} // namespace sinewright::ui

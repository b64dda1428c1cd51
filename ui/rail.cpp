// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/rail.h"

#include <QLabel>
#include <QPainter>
#include <QVBoxLayout>

#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kWidth = 148;
constexpr int kPageHeight = 40;
constexpr int kCommandHeight = 25;
constexpr int kMargin = 18;
constexpr int kNumberWidth = 22;
constexpr int kMarkWidth = 3;
constexpr int kPageType = 17;
constexpr int kCommandType = 13;

QString tipOf(const QAction& action)
{
    const QString keys = action.shortcut().toString(QKeySequence::NativeText);
    return keys.isEmpty() ? action.toolTip() : action.toolTip() + u" ("_s + keys + u')';
}

} // namespace

RailButton::RailButton(QAction* action, int number, QWidget* parent)
    : QAbstractButton(parent)
    , m_action(action)
    , m_number(number)
    , m_theme(&ui::theme(ThemeName::Paper))
{
    setCheckable(action->isCheckable());
    setFocusPolicy(Qt::TabFocus);
    setCursor(Qt::PointingHandCursor);
    setSizePolicy(QSizePolicy::Fixed, QSizePolicy::Fixed);
    connect(action, &QAction::changed, this, &RailButton::follow);
    connect(this, &QAbstractButton::clicked, action, &QAction::trigger);
    follow();
}

void RailButton::follow()
{
    setText(m_action->iconText());
    setAccessibleName(m_action->text());
    setToolTip(tipOf(*m_action));
    setChecked(m_action->isChecked());
    setEnabled(m_action->isEnabled());
    update();
}

void RailButton::setTheme(const Theme& theme)
{
    m_theme = &theme;
    update();
}

QSize RailButton::sizeHint() const
{
    return {kWidth, m_number > 0 ? kPageHeight : kCommandHeight};
}

void RailButton::enterEvent(QEnterEvent* /*event*/)
{
    update();
}

void RailButton::leaveEvent(QEvent* /*event*/)
{
    update();
}

void RailButton::paintEvent(QPaintEvent* /*event*/)
{
    QPainter painter(this);
    if (m_number > 0) {
        paintPage(painter);
    } else {
        paintCommand(painter);
    }
    if (hasFocus()) {
        painter.setPen(QPen(m_theme->copper, 1.5));
        painter.setBrush(Qt::NoBrush);
        painter.drawRect(QRectF(rect()).adjusted(6.5, 1.5, -6.5, -1.5));
    }
}

void RailButton::paintPage(QPainter& painter) const
{
    if (isChecked()) {
        painter.fillRect(QRect(0, 0, width(), height()), m_theme->page);
        painter.fillRect(QRect(0, 0, kMarkWidth, height()), m_theme->copper);
    }
    const int baseline = height() / 2 + kPageType / 3 + 1;
    painter.setFont(figureFont(kCommandType));
    painter.setPen(isChecked() ? m_theme->copper : m_theme->inkSoft);
    painter.drawText(QPoint(kMargin, baseline), QString::number(m_number));
    QFont font = sentenceFont(kPageType);
    font.setBold(isChecked());
    painter.setFont(font);
    painter.setPen(isChecked() || underMouse() ? m_theme->ink : m_theme->inkSoft);
    painter.drawText(QPoint(kMargin + kNumberWidth, baseline), text());
}

void RailButton::paintCommand(QPainter& painter) const
{
    const int baseline = height() / 2 + kCommandType / 3;
    if (isChecked()) {
        painter.fillRect(QRect(0, 0, kMarkWidth, height()), m_theme->copper);
    }
    painter.setFont(textFont(kCommandType));
    painter.setPen(isChecked() ? m_theme->copper : underMouse() ? m_theme->ink : m_theme->inkSoft);
    painter.drawText(QPoint(kMargin, baseline), text());
    painter.setFont(figureFont(kCommandType - 1));
    painter.setPen(m_theme->inkSoft);
    const QString key = m_action->shortcut().toString(QKeySequence::NativeText);
    painter.drawText(
        QPointF(width() - kMargin + 4 - QFontMetricsF(painter.font()).horizontalAdvance(key),
                baseline),
        key);
}

Rail::Rail(const QList<QAction*>& pages, const QList<QAction*>& commands, QWidget* parent)
    : QWidget(parent)
{
    setObjectName(u"rail"_s);
    setAttribute(Qt::WA_StyledBackground);
    setAccessibleName(tr("Pages"));
    setFixedWidth(kWidth);
    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(0, 16, 0, 12);
    column->setSpacing(0);
    auto* name = new QLabel(u"Sinewright"_s, this);
    QFont font = sentenceFont(19);
    font.setItalic(true);
    name->setFont(font);
    name->setContentsMargins(kMargin, 0, 0, 18);
    column->addWidget(name);
    int number = 0;
    for (QAction* page : pages) {
        m_buttons << new RailButton(page, ++number, this);
        column->addWidget(m_buttons.last());
    }
    column->addStretch(1);
    for (QAction* command : commands) {
        m_buttons << new RailButton(command, 0, this);
        column->addWidget(m_buttons.last());
    }
}

void Rail::setTheme(const Theme& theme)
{
    for (RailButton* button : std::as_const(m_buttons)) {
        button->setTheme(theme);
    }
}

} // namespace sinewright::ui

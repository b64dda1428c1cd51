// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/prose.h"

#include "ui/theme.h"

#include <QFrame>
#include <QHBoxLayout>
#include <QScrollArea>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kTextWidth = 900;

QLabel* label(const QString& text, const QFont& font, QWidget* parent)
{
    auto* result = new QLabel(text, parent);
    result->setFont(font);
    result->setWordWrap(true);
    result->setTextFormat(Qt::PlainText);
    return result;
}

} // namespace

QLabel* titleLabel(const QString& text, QWidget* parent)
{
    return label(text, sentenceFont(27), parent);
}

QLabel* headingLabel(const QString& text, QWidget* parent)
{
    return label(text, sentenceFont(19), parent);
}

QLabel* paragraphLabel(const QString& text, QWidget* parent)
{
    return label(text, sentenceFont(15), parent);
}

QLabel* fieldLabel(const QString& text, QWidget* parent)
{
    QLabel* result = label(text, labelFont(11), parent);
    result->setWordWrap(false);
    result->setProperty("role", u"label"_s);
    return result;
}

QWidget* hairRule(QWidget* parent)
{
    auto* rule = new QFrame(parent);
    rule->setProperty("role", u"rule"_s);
    rule->setFixedHeight(1);
    return rule;
}

QVBoxLayout* scrollingSheet(QWidget* page)
{
    auto* outer = new QVBoxLayout(page);
    outer->setContentsMargins(0, 0, 0, 0);
    auto* scroll = new QScrollArea(page);
    scroll->setWidgetResizable(true);
    scroll->setFrameShape(QFrame::NoFrame);
    scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
    auto* sheet = new QWidget(scroll);
    sheet->setObjectName(u"sheet"_s);
    auto* row = new QHBoxLayout(sheet);
    row->setContentsMargins(0, 0, 12, 12);
    auto* text = new QWidget(sheet);
    text->setMaximumWidth(kTextWidth);
    row->addWidget(text, 1);
    row->addStretch(0);
    auto* column = new QVBoxLayout(text);
    column->setContentsMargins(0, 4, 0, 0);
    column->setSpacing(12);
    scroll->setWidget(sheet);
    outer->addWidget(scroll);
    return column;
}

} // namespace sinewright::ui

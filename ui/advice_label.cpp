// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/advice_label.h"

#include <QFontMetrics>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kUnbounded = 100000;

} // namespace

AdviceLabel::AdviceLabel(QWidget* parent) : QLabel(parent), m_theme(&ui::theme(ThemeName::Paper))
{
    setObjectName(u"advice"_s);
    setAccessibleName(tr("Advice"));
    setTextFormat(Qt::PlainText);
    setWordWrap(true);
    setAlignment(Qt::AlignLeft | Qt::AlignVCenter);
    setTypeSizes(m_largest, m_smallest, m_lines);
}

void AdviceLabel::setTheme(const Theme& theme)
{
    m_theme = &theme;
    colour();
}

void AdviceLabel::setTypeSizes(int largest, int smallest, int lines)
{
    m_largest = largest;
    m_smallest = smallest;
    m_lines = lines;
    setFixedHeight(QFontMetrics(sentenceFont(largest)).height() * lines + 4);
    fit();
}

void AdviceLabel::setSentence(const QString& sentence, bool isAlert)
{
    if (sentence != text()) {
        setText(sentence);
        fit();
    }
    if (isAlert != m_isAlert) {
        m_isAlert = isAlert;
        colour();
    }
}

QSize AdviceLabel::minimumSizeHint() const
{
    return {200, height()};
}

void AdviceLabel::resizeEvent(QResizeEvent* event)
{
    QLabel::resizeEvent(event);
    fit();
}

void AdviceLabel::fit()
{
    int pixels = m_largest;
    for (; pixels > m_smallest; --pixels) {
        const QFontMetrics metrics(sentenceFont(pixels));
        const QRect needed =
            metrics.boundingRect(QRect(0, 0, width(), kUnbounded), Qt::TextWordWrap, text());
        if (needed.height() <= metrics.height() * m_lines && needed.width() <= width()) {
            break;
        }
    }
    if (font().pixelSize() != pixels || font().families() != sentenceFont(pixels).families()) {
        setFont(sentenceFont(pixels));
    }
}

void AdviceLabel::colour()
{
    QPalette palette = this->palette();
    palette.setColor(QPalette::WindowText, m_isAlert ? m_theme->alert : m_theme->ink);
    setPalette(palette);
}

} // namespace sinewright::ui

// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/advice_label.h"

#include <QFontMetrics>
#include <QPainter>

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
    update();
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
        update();
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
        // Heights are rounded line by line: half a line more is not yet another line.
        if (2 * needed.height() <= metrics.height() * (2 * m_lines + 1) &&
            needed.width() <= width()) {
            break;
        }
    }
    if (pixels != m_pixels) {
        m_pixels = pixels;
        update();
    }
}

void AdviceLabel::paintEvent(QPaintEvent* /*event*/)
{
    // Not through the widget's font: a change of style sheet would put back an older one.
    QPainter painter(this);
    painter.setFont(sentenceFont(m_pixels));
    painter.setPen(m_isAlert ? m_theme->alert : m_theme->ink);
    painter.drawText(rect(), Qt::AlignLeft | Qt::AlignVCenter | Qt::TextWordWrap, text());
}

} // namespace sinewright::ui

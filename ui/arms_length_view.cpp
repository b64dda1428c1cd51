// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/arms_length_view.h"

#include "ui/reading_choice.h"
#include "ui/trend_plot.h"

#include <QPainter>
#include <QVBoxLayout>

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kThirdOfWindow = 3;
constexpr double kUnitShare = 0.32; ///< height of the percent sign over that of the digits
constexpr double kGap = 0.05;       ///< between digits and unit, over the font's size
constexpr qint64 kShowEveryMs = 240;
constexpr int kMargin = 36;

} // namespace

GreatFigure::GreatFigure(QWidget* parent) : QWidget(parent), m_theme(&ui::theme(ThemeName::Paper))
{
    setObjectName(u"greatFigure"_s);
    setAccessibleName(tr("THD in percent"));
    setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
    m_figure = percentFigure(std::nullopt);
}

void GreatFigure::setTheme(const Theme& theme)
{
    m_theme = &theme;
    update();
}

void GreatFigure::setFigure(const FigureText& figure)
{
    if (!(figure == m_figure)) {
        m_figure = figure;
        setAccessibleDescription(joined(figure));
        update();
    }
}

int GreatFigure::fontPixels() const
{
    constexpr int kProbe = 200; // any size: metrics scale
    const QFontMetricsF digits(displayFont(kProbe));
    const QFontMetricsF unit(displayFont(static_cast<int>(kProbe * kUnitShare)));
    const double perHeight = kProbe / digits.capHeight();
    const double widthAtProbe = digits.horizontalAdvance(m_figure.value) + kGap * kProbe +
                                unit.horizontalAdvance(m_figure.unit);
    const double wanted = window()->height() / static_cast<double>(kThirdOfWindow) * perHeight;
    return static_cast<int>(std::min(wanted, kProbe * width() / widthAtProbe));
}

double GreatFigure::digitHeight() const
{
    return QFontMetricsF(displayFont(fontPixels())).capHeight();
}

void GreatFigure::paintEvent(QPaintEvent* /*event*/)
{
    QPainter painter(this);
    const int pixels = fontPixels();
    painter.setFont(displayFont(pixels));
    painter.setPen(m_theme->copper);
    const QFontMetricsF metrics(painter.font());
    const double baseline = (height() + metrics.capHeight()) / 2.0;
    painter.drawText(QPointF(-0.04 * pixels, baseline), m_figure.value);
    const double x = metrics.horizontalAdvance(m_figure.value) + kGap * pixels;
    painter.setFont(displayFont(static_cast<int>(pixels * kUnitShare)));
    painter.setPen(m_theme->inkSoft);
    painter.drawText(QPointF(x, baseline), m_figure.unit);
}

ArmsLengthView::ArmsLengthView(QWidget* parent)
    : BenchPage(parent)
    , m_great(new GreatFigure(this))
    , m_advice(new AdviceLabel(this))
    , m_trend(new TrendPlot(this))
{
    setAccessibleName(tr("Arm's length view"));
    m_trend->setTypeSize(16);
    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(kMargin, kMargin, kMargin, kMargin / 2);
    column->setSpacing(kMargin / 2);
    column->addWidget(m_great);
    column->addWidget(m_advice);
    column->addWidget(m_trend, 1);
}

void ArmsLengthView::resizeEvent(QResizeEvent* event)
{
    BenchPage::resizeEvent(event);
    m_great->setFixedHeight(static_cast<int>(height() / static_cast<double>(kThirdOfWindow)) + 12);
    const int pixels = std::clamp(height() / 22, 22, 52);
    m_advice->setTypeSizes(pixels, pixels / 2, 1);
}

void ArmsLengthView::showFrame(const std::shared_ptr<const core::Frame>& frame)
{
    m_trend->setFrame(frame);
    if (m_sinceShown.isValid() && !m_sinceShown.hasExpired(kShowEveryMs)) {
        return;
    }
    m_sinceShown.start();
    const ShownReading shown = frame ? shownReading(*frame) : ShownReading{};
    m_great->setFigure(percentFigure(shown.reading ? shown.reading->thdRatio : std::nullopt,
                                     shown.isFull ? kFullDigits : kQuickDigits));
}

void ArmsLengthView::setTheme(const Theme& theme)
{
    m_great->setTheme(theme);
    m_advice->setTheme(theme);
    m_trend->setTheme(theme);
}

QList<Plot*> ArmsLengthView::plots() const
{
    return {m_trend};
}

void ArmsLengthView::setAdvice(const QString& sentence, bool isAlert)
{
    m_advice->setSentence(sentence, isAlert);
}

} // namespace sinewright::ui

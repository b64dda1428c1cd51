// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/trimmer.h"

#include "ui/figure_text.h"

#include <QAction>
#include <QMouseEvent>
#include <QPainter>
#include <QPainterPath>
#include <QWheelEvent>

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr double kOhmPerStep = 0.1;
constexpr int kFineSteps = 2;
constexpr int kCoarseSteps = 50;
constexpr int kWheelSteps = 10; ///< a notch of the wheel
constexpr int kEnd = 1 << 20;   ///< more than any travel
constexpr int kNotch = 120;     ///< QWheelEvent::angleDelta() of one notch
constexpr double kLabelWidth = 116.0;
constexpr double kValueWidth = 84.0;
constexpr double kRulerY = 12.0;
constexpr double kTickOhm = 10.0;
constexpr double kNumberOhm = 50.0;
constexpr int kTypeSize = 11;

int stepsOf(double ohm)
{
    return static_cast<int>(std::lround(ohm / kOhmPerStep));
}

} // namespace

Trimmer::Trimmer(QWidget* parent)
    : QSlider(Qt::Horizontal, parent)
    , m_theme(&ui::theme(ThemeName::Paper))
{
    static_assert(kFineSteps * 10 == static_cast<int>(kFineOhm * 100.0));
    setObjectName(u"trimmer"_s);
    setAccessibleName(tr("Virtual trimmer, in tenths of an ohm"));
    setToolTip(tr("The demo's gain trimmer, in ohm. Drag it, use the wheel (Ctrl: coarse) or the "
                  "arrow keys."));
    setFocusPolicy(Qt::StrongFocus);
    setSingleStep(kFineSteps);
    setPageStep(kCoarseSteps);
    addKey(tr("Trimmer: a little up"), Qt::Key_Up, kFineSteps);
    addKey(tr("Trimmer: a little down"), Qt::Key_Down, -kFineSteps);
    addKey(tr("Trimmer: up"), Qt::Key_PageUp, kCoarseSteps);
    addKey(tr("Trimmer: down"), Qt::Key_PageDown, -kCoarseSteps);
    addKey(tr("Trimmer: to its lowest"), Qt::Key_Home, -kEnd);
    addKey(tr("Trimmer: to its highest"), Qt::Key_End, kEnd);
}

void Trimmer::addKey(const QString& text, const QKeySequence& key, int steps)
{
    auto* action = new QAction(text, this);
    action->setShortcut(key);
    action->setShortcutContext(Qt::WidgetWithChildrenShortcut);
    action->setAutoRepeat(true);
    connect(action, &QAction::triggered, this, [this, steps] { turnBy(steps); });
    addAction(action);
    m_keyActions << action;
}

void Trimmer::setTheme(const Theme& theme)
{
    m_theme = &theme;
    update();
}

void Trimmer::setTravel(double lowestOhm, double highestOhm)
{
    setRange(stepsOf(lowestOhm), stepsOf(highestOhm));
}

void Trimmer::setOhm(double ohm)
{
    if (!isSliderDown()) {
        setValue(stepsOf(ohm));
    }
}

double Trimmer::ohm() const
{
    return value() * kOhmPerStep;
}

QSize Trimmer::sizeHint() const
{
    return {400, 36};
}

QSize Trimmer::minimumSizeHint() const
{
    return {300, 36};
}

void Trimmer::turnBy(int steps)
{
    turnTo(std::clamp(value() + steps, minimum(), maximum()));
}

void Trimmer::turnTo(int value)
{
    const int before = this->value();
    setValue(value);
    if (this->value() != before) {
        emit moved(ohm());
    }
}

double Trimmer::pixelOf(double ohm) const
{
    const double low = minimum() * kOhmPerStep;
    const double span = std::max(1, maximum() - minimum()) * kOhmPerStep;
    return kLabelWidth + (width() - kLabelWidth - kValueWidth) * (ohm - low) / span;
}

void Trimmer::mousePressEvent(QMouseEvent* event)
{
    if (event->button() == Qt::LeftButton) {
        setSliderDown(true);
        mouseMoveEvent(event);
    }
}

void Trimmer::mouseMoveEvent(QMouseEvent* event)
{
    if (!isSliderDown()) {
        return;
    }
    const double share =
        (event->position().x() - kLabelWidth) / (width() - kLabelWidth - kValueWidth);
    turnTo(minimum() +
           static_cast<int>(std::lround(std::clamp(share, 0.0, 1.0) * (maximum() - minimum()))));
    event->accept();
}

void Trimmer::mouseReleaseEvent(QMouseEvent* /*event*/)
{
    setSliderDown(false);
}

void Trimmer::wheelEvent(QWheelEvent* event)
{
    const int step = event->modifiers().testFlag(Qt::ControlModifier) ? kCoarseSteps : kWheelSteps;
    const int delta =
        event->angleDelta().y() != 0 ? event->angleDelta().y() : event->angleDelta().x();
    turnBy(static_cast<int>(std::lround(static_cast<double>(delta) * step / kNotch)));
    event->accept();
}

void Trimmer::paintEvent(QPaintEvent* /*event*/)
{
    QPainter painter(this);
    painter.setFont(labelFont(kTypeSize));
    painter.setPen(m_theme->inkSoft);
    painter.drawText(QPointF(0.0, kRulerY + 4.0), tr("Virtual trimmer"));
    paintRuler(painter);
    paintIndex(painter);
    painter.setFont(figureFont(17));
    painter.setPen(m_theme->ink);
    painter.drawText(QRectF(width() - kValueWidth, 0.0, kValueWidth, 2.0 * kRulerY),
                     Qt::AlignRight | Qt::AlignVCenter,
                     joined({numberText(ohm(), 1), u"Ω"_s}));
}

void Trimmer::paintRuler(QPainter& painter) const
{
    const double low = minimum() * kOhmPerStep;
    const double high = maximum() * kOhmPerStep;
    const QPen hair(m_theme->hairline, 1.0);
    painter.setPen(hair);
    painter.drawLine(QPointF(pixelOf(low), kRulerY + 0.5), QPointF(pixelOf(high), kRulerY + 0.5));
    painter.setFont(figureFont(kTypeSize));
    const QFontMetricsF metrics(painter.font());
    const int first = static_cast<int>(std::ceil(low / kTickOhm));
    const int last = static_cast<int>(std::floor(high / kTickOhm));
    for (int index = first; index <= last; ++index) {
        const double tick = index * kTickOhm;
        const bool isNumbered = std::fmod(tick, kNumberOhm) == 0.0;
        const double x = std::round(pixelOf(tick)) + 0.5;
        painter.setPen(hair);
        painter.drawLine(QPointF(x, kRulerY + 0.5), QPointF(x, kRulerY + (isNumbered ? 8.0 : 4.0)));
        if (isNumbered) {
            const QString text = numberText(tick, 0);
            painter.setPen(m_theme->inkSoft);
            painter.drawText(
                QPointF(x - metrics.horizontalAdvance(text) / 2.0, kRulerY + 9.0 + kTypeSize),
                text);
        }
    }
}

void Trimmer::paintIndex(QPainter& painter) const
{
    const double x = pixelOf(ohm());
    QPainterPath index;
    index.moveTo(x, kRulerY + 5.0);
    index.lineTo(x - 6.0, kRulerY - 4.0);
    index.lineTo(x - 6.0, kRulerY - 11.0);
    index.lineTo(x + 6.0, kRulerY - 11.0);
    index.lineTo(x + 6.0, kRulerY - 4.0);
    index.closeSubpath();
    painter.setRenderHint(QPainter::Antialiasing);
    painter.fillPath(index, m_theme->copper);
    if (hasFocus()) {
        painter.setPen(QPen(m_theme->ink, 1.2));
        painter.drawPath(index);
    }
}

} // namespace sinewright::ui

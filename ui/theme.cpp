// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/theme.h"

#include <QApplication>
#include <QStyleFactory>

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kLabelSpacingPercent = 108;

const QStringList kSerifFamilies{u"Charis SIL"_s, u"DejaVu Serif"_s};
const QStringList kSansFamilies{u"Roboto"_s, u"DejaVu Sans"_s};
const QStringList kNarrowFamilies{
    u"Roboto Condensed"_s, u"DejaVu Sans Condensed"_s, u"DejaVu Sans"_s};

Theme paper()
{
    Theme t;
    t.page = QColor(0xF7, 0xF2, 0xE8);
    t.rail = QColor(0xEF, 0xE8, 0xDA);
    t.ink = QColor(0x26, 0x22, 0x1D);
    t.inkSoft = QColor(0x66, 0x5D, 0x51);
    t.copper = QColor(0x9C, 0x46, 0x17);
    t.verdigris = QColor(0x15, 0x6B, 0x5F);
    t.slate = QColor(0x41, 0x55, 0x6E);
    t.alert = QColor(0x9E, 0x1B, 0x2B);
    t.hairline = QColor(0xC4, 0xB9, 0xA6);
    t.grid = QColor(0xE5, 0xDD, 0xCE);
    t.wash = QColor(0xDD, 0xD5, 0xC6);
    return t;
}

Theme dusk()
{
    Theme t;
    t.page = QColor(0x22, 0x21, 0x24);
    t.rail = QColor(0x1B, 0x1A, 0x1D);
    t.ink = QColor(0xEA, 0xE3, 0xD6);
    t.inkSoft = QColor(0xA9, 0xA1, 0x95);
    t.copper = QColor(0xE8, 0x9C, 0x64);
    t.verdigris = QColor(0x6C, 0xC4, 0xB0);
    t.slate = QColor(0x9B, 0xB3, 0xD0);
    t.alert = QColor(0xFF, 0x8A, 0x80);
    t.hairline = QColor(0x57, 0x53, 0x50);
    t.grid = QColor(0x33, 0x31, 0x34);
    t.wash = QColor(0x3D, 0x3B, 0x3E);
    return t;
}

// The constants of the sRGB transfer curve and of its luminance; see the header for the source.
double linearChannel(double value)
{
    constexpr double kKnee = 0.03928;
    constexpr double kSlope = 12.92;
    constexpr double kOffset = 0.055;
    constexpr double kExponent = 2.4;
    return value <= kKnee ? value / kSlope
                          : std::pow((value + kOffset) / (1.0 + kOffset), kExponent);
}

double relativeLuminance(const QColor& colour)
{
    constexpr double kRed = 0.2126;
    constexpr double kGreen = 0.7152;
    constexpr double kBlue = 0.0722;
    return kRed * linearChannel(static_cast<double>(colour.redF())) +
           kGreen * linearChannel(static_cast<double>(colour.greenF())) +
           kBlue * linearChannel(static_cast<double>(colour.blueF()));
}

QFont font(const QStringList& families, int pixels)
{
    QFont result;
    result.setFamilies(families);
    result.setPixelSize(std::max(1, pixels));
    return result;
}

} // namespace

const Theme& theme(ThemeName name)
{
    static const Theme kPaper = paper();
    static const Theme kDusk = dusk();
    return name == ThemeName::Paper ? kPaper : kDusk;
}

QPalette paletteOf(const Theme& theme)
{
    QPalette result(theme.ink, theme.page);
    result.setColor(QPalette::Window, theme.page);
    result.setColor(QPalette::WindowText, theme.ink);
    result.setColor(QPalette::Base, theme.page);
    result.setColor(QPalette::AlternateBase, theme.rail);
    result.setColor(QPalette::Text, theme.ink);
    result.setColor(QPalette::PlaceholderText, theme.inkSoft);
    result.setColor(QPalette::Button, theme.rail);
    result.setColor(QPalette::ButtonText, theme.ink);
    result.setColor(QPalette::BrightText, theme.alert);
    result.setColor(QPalette::ToolTipBase, theme.rail);
    result.setColor(QPalette::ToolTipText, theme.ink);
    result.setColor(QPalette::Highlight, theme.slate);
    result.setColor(QPalette::HighlightedText, theme.page);
    result.setColor(QPalette::Link, theme.slate);
    result.setColor(QPalette::LinkVisited, theme.slate);
    for (const auto role : {QPalette::WindowText, QPalette::Text, QPalette::ButtonText}) {
        result.setColor(QPalette::Disabled, role, theme.inkSoft);
    }
    return result;
}

QString styleSheetOf(const Theme& theme)
{
    QString sheet = uR"(
QToolTip { background: @rail; color: @ink; border: 1px solid @hairline; padding: 4px 6px; }
QMainWindow, QDialog, QScrollArea, QScrollArea > QWidget > QWidget#sheet { background: @page; border: none; }
QWidget#rail { background: @rail; }
QLabel[role="soft"] { color: @inkSoft; }
QLabel[role="label"] { color: @inkSoft; }
QLabel[role="alert"] { color: @alert; }
QFrame[role="rule"] { background: @hairline; border: none; }
QComboBox, QLineEdit, QDoubleSpinBox, QSpinBox {
  background: @page; color: @ink; border: none; border-bottom: 1px solid @hairline;
  padding: 3px 4px 2px 2px; selection-background-color: @slate; selection-color: @page; }
QComboBox:hover, QLineEdit:hover, QDoubleSpinBox:hover, QSpinBox:hover { border-bottom: 1px solid @ink; }
QComboBox:focus, QLineEdit:focus, QDoubleSpinBox:focus, QSpinBox:focus { border-bottom: 2px solid @copper; padding-bottom: 1px; }
QComboBox:disabled, QDoubleSpinBox:disabled, QSpinBox:disabled { color: @inkSoft; }
QComboBox::drop-down { border: none; width: 18px; }
QComboBox QAbstractItemView { background: @page; color: @ink; border: 1px solid @hairline; padding: 2px;
  selection-background-color: @slate; selection-color: @page; outline: none; }
QPushButton { background: @rail; color: @ink; border: 1px solid @hairline; border-radius: 2px; padding: 5px 14px; }
QPushButton:hover { border-color: @ink; }
QPushButton:focus { border: 2px solid @copper; padding: 4px 13px; }
QPushButton:pressed, QPushButton:checked { background: @wash; }
QRadioButton { spacing: 7px; color: @ink; }
QRadioButton::indicator { width: 12px; height: 12px; border-radius: 7px; border: 1px solid @inkSoft; background: @page; }
QRadioButton::indicator:checked { width: 6px; height: 6px; border: 4px solid @copper; }
QRadioButton:focus { color: @copper; }
QTableView { background: @page; color: @ink; border: none; gridline-color: @grid;
  selection-background-color: @slate; selection-color: @page; }
QHeaderView::section { background: @page; color: @inkSoft; border: none; border-bottom: 1px solid @hairline; padding: 4px 3px; }
QScrollBar:vertical { background: @page; width: 10px; margin: 0; }
QScrollBar::handle:vertical { background: @hairline; min-height: 32px; border-radius: 3px; margin: 1px 2px; }
QScrollBar::add-line, QScrollBar::sub-line { height: 0; width: 0; }
QScrollBar::add-page, QScrollBar::sub-page { background: @page; }
)"_s;
    const std::pair<QString, QColor> names[] = {
        {u"@inkSoft"_s, theme.inkSoft},
        {u"@ink"_s, theme.ink},
        {u"@page"_s, theme.page},
        {u"@rail"_s, theme.rail},
        {u"@hairline"_s, theme.hairline},
        {u"@grid"_s, theme.grid},
        {u"@wash"_s, theme.wash},
        {u"@slate"_s, theme.slate},
        {u"@copper"_s, theme.copper},
        {u"@verdigris"_s, theme.verdigris},
        {u"@alert"_s, theme.alert},
    };
    for (const auto& [name, colour] : names) {
        sheet.replace(name, colour.name());
    }
    return sheet;
}

void applyTheme(ThemeName name)
{
    QApplication::setStyle(QStyleFactory::create(u"Fusion"_s));
    QApplication::setPalette(paletteOf(theme(name)));
    QApplication::setFont(textFont(13));
    qApp->setStyleSheet(styleSheetOf(theme(name)));
}

double contrastRatio(const QColor& a, const QColor& b)
{
    constexpr double kFlare = 0.05;
    const double first = relativeLuminance(a) + kFlare;
    const double second = relativeLuminance(b) + kFlare;
    return std::max(first, second) / std::min(first, second);
}

QFont sentenceFont(int pixels)
{
    return font(kSerifFamilies, pixels);
}

QFont textFont(int pixels)
{
    return font(kSansFamilies, pixels);
}

QFont figureFont(int pixels)
{
    return font(kNarrowFamilies, pixels);
}

QFont labelFont(int pixels)
{
    QFont result = font(kNarrowFamilies, pixels);
    result.setCapitalization(QFont::AllUppercase);
    result.setLetterSpacing(QFont::PercentageSpacing, kLabelSpacingPercent);
    return result;
}

QFont displayFont(int pixels)
{
    QFont result = font(kNarrowFamilies, pixels);
    result.setWeight(QFont::Light);
    return result;
}

} // namespace sinewright::ui

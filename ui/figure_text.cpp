// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/figure_text.h"

#include "core/units.h"

#include <QCoreApplication>
#include <QLocale>

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kMostDecimals = 8;
constexpr QChar kNoBreakSpace{0x00A0};
constexpr QChar kMinus{0x2212};
constexpr double kPercent = 100.0;

struct Words
{
    Q_DECLARE_TR_FUNCTIONS(sinewright::ui::FigureText)
};

/// Decimals that leave `significant` digits of a positive value, rounding up to the next power of ten considered.
int decimalsFor(double value, int significant)
{
    if (!(value > 0.0)) {
        return 0;
    }
    int exponent = static_cast<int>(std::floor(std::log10(value)));
    const double unit = std::pow(10.0, exponent - significant + 1);
    if (std::round(value / unit) * unit >= std::pow(10.0, exponent + 1)) {
        ++exponent;
    }
    return std::clamp(significant - 1 - exponent, 0, kMostDecimals);
}

} // namespace

QString numberText(double value, int decimals)
{
    QLocale locale;
    locale.setNumberOptions(QLocale::OmitGroupSeparator);
    QString text = locale.toString(std::abs(value), 'f', decimals);
    const bool isZero = std::none_of(
        text.cbegin(), text.cend(), [](QChar c) { return c.isDigit() && c.digitValue() != 0; });
    return value < 0.0 && !isZero ? kMinus + text : text;
}

FigureText percentFigure(std::optional<double> ratio, int significant)
{
    if (!ratio || !std::isfinite(*ratio)) {
        return {kAbsent, u"%"_s};
    }
    const double percent = *ratio * kPercent;
    return {numberText(percent, decimalsFor(percent, significant)), u"%"_s};
}

FigureText ratioDecibelFigure(std::optional<double> ratio, int decimals, const QString& unit)
{
    if (!ratio || !(*ratio > 0.0)) {
        return {kAbsent, unit};
    }
    return decibelFigure(core::decibelsFromRatio(*ratio), decimals, unit);
}

FigureText decibelFigure(std::optional<double> decibels, int decimals, const QString& unit)
{
    if (!decibels || !std::isfinite(*decibels)) {
        return {kAbsent, unit};
    }
    return {numberText(*decibels, decimals), unit};
}

FigureText frequencyFigure(std::optional<double> hz, std::optional<double> stdHz)
{
    constexpr int kFinestDecimals = 3;
    if (!hz || !std::isfinite(*hz)) {
        return {kAbsent, u"Hz"_s};
    }
    int decimals = decimalsFor(*hz, 3);
    if (stdHz && *stdHz > 0.0) {
        decimals =
            std::clamp(-static_cast<int>(std::floor(std::log10(*stdHz))), 0, kFinestDecimals);
    }
    return {numberText(*hz, decimals), u"Hz"_s};
}

FigureText frequencySpreadFigure(std::optional<double> stdHz)
{
    constexpr double kThousand = 1e3;
    if (!stdHz || !std::isfinite(*stdHz) || *stdHz <= 0.0) {
        return {kAbsent, u"Hz"_s};
    }
    double value = *stdHz;
    QString unit = u"Hz"_s;
    for (const QString& finer : {u"mHz"_s, u"µHz"_s}) {
        if (value < 1.0) {
            value *= kThousand;
            unit = finer;
        }
    }
    return {numberText(value, decimalsFor(value, 2)), unit};
}

FigureText voltFigure(std::optional<double> volts)
{
    constexpr double kMilli = 1e-3;
    constexpr double kMilliBelow = 0.1;
    constexpr int kDigits = 4;
    if (!volts || !std::isfinite(*volts)) {
        return {kAbsent, u"V"_s};
    }
    if (*volts < kMilliBelow) {
        const double milli = *volts / kMilli;
        return {numberText(milli, std::min(3, decimalsFor(milli, kDigits))), u"mV"_s};
    }
    return {numberText(*volts, decimalsFor(*volts, kDigits)), u"V"_s};
}

FigureText degreeFigure(std::optional<double> degrees)
{
    if (!degrees || !std::isfinite(*degrees)) {
        return {kAbsent, u"°"_s};
    }
    return {numberText(*degrees, 1), u"°"_s};
}

QString roundFrequencyText(double hz)
{
    constexpr double kKilo = 1000.0;
    constexpr int kDigits = 3;
    if (hz >= kKilo) {
        return numberText(hz / kKilo, decimalsFor(hz / kKilo, kDigits)) + kNoBreakSpace + u"kHz"_s;
    }
    return numberText(hz, decimalsFor(hz, kDigits)) + kNoBreakSpace + u"Hz"_s;
}

QString rateText(double hz)
{
    constexpr double kKilo = 1000.0;
    const double kilo = hz / kKilo;
    int decimals = 0;
    while (decimals < 3 && std::abs(kilo * std::pow(10.0, decimals) -
                                    std::round(kilo * std::pow(10.0, decimals))) > 1e-6) {
        ++decimals;
    }
    return numberText(kilo, decimals) + kNoBreakSpace + u"kHz"_s;
}

QString joined(const FigureText& figure)
{
    if (figure.unit.isEmpty()) {
        return figure.value;
    }
    return figure.unit == "°"_L1 ? figure.value + figure.unit
                                 : figure.value + kNoBreakSpace + figure.unit;
}

QString statusText(core::ReadingStatus status)
{
    switch (status) {
    case core::ReadingStatus::Ok:
        return {};
    case core::ReadingStatus::NoTone:
        return Words::tr("no tone");
    case core::ReadingStatus::TooShort:
        return Words::tr("too short");
    case core::ReadingStatus::Overload:
        return Words::tr("overload");
    }
    return {};
}

QString warningText(core::Warning warning)
{
    switch (warning) {
    case core::Warning::InputOverload:
        return Words::tr("input overloaded");
    case core::Warning::HarmonicsAboveBand:
        return Words::tr("harmonics above the band");
    case core::Warning::UnsteadyLevel:
        return Words::tr("level not steady");
    case core::Warning::UnsteadyFrequency:
        return Words::tr("frequency not steady");
    case core::Warning::MainsHum:
        return Words::tr("mains hum");
    case core::Warning::DcOffset:
        return Words::tr("DC offset");
    case core::Warning::CardLimited:
        return Words::tr("limited by the interface");
    }
    return {};
}

} // namespace sinewright::ui

// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/reading.h"

#include <QString>

#include <optional>

namespace sinewright::ui {

/// A figure as it is set: the digits, and apart from them the unit. An absent figure is a dash with its unit.
struct FigureText
{
    QString value;
    QString unit;
    friend bool operator==(const FigureText&, const FigureText&) = default;
};

/// What stands where a figure cannot be had.
inline constexpr QChar kAbsent{0x2014};

/// Digits that are worth showing of a reading: a quick one holds for about 3 %, so its third digit would only dance.
inline constexpr int kFullDigits = 3;
inline constexpr int kQuickDigits = 2;

/// A number with fixed decimals, true minus sign and the user's decimal mark, without grouping.
[[nodiscard]] QString numberText(double value, int decimals);

/// An amplitude ratio as percent with so many significant digits, trailing zeros kept.
[[nodiscard]] FigureText percentFigure(std::optional<double> ratio, int significant = kFullDigits);

/// A ratio as decibels. Ratio 0 counts as absent: minus infinity is no figure.
[[nodiscard]] FigureText
ratioDecibelFigure(std::optional<double> ratio, int decimals, const QString& unit);

[[nodiscard]] FigureText
decibelFigure(std::optional<double> decibels, int decimals, const QString& unit);

/// Hertz, cut after the digit that one standard deviation reaches; three decimals at most, and three significant
/// digits when no deviation is known.
[[nodiscard]] FigureText frequencyFigure(std::optional<double> hz, std::optional<double> stdHz);

/// One standard deviation of a frequency, two significant digits or all before the point, as Hz, mHz or µHz.
[[nodiscard]] FigureText frequencySpreadFigure(std::optional<double> stdHz);

/// Volts rms, four significant digits, as V or mV.
[[nodiscard]] FigureText voltFigure(std::optional<double> volts);

[[nodiscard]] FigureText degreeFigure(std::optional<double> degrees);

/// A frequency in words of a sentence: three digits, Hz or kHz.
[[nodiscard]] QString roundFrequencyText(double hz);

/// A sample rate as the trade writes it: "96 kHz", "44.1 kHz".
[[nodiscard]] QString rateText(double hz);

/// Value and unit with a no-break space between.
[[nodiscard]] QString joined(const FigureText& figure);

/// Name of a status other than Ok, and of a warning, as a short phrase.
[[nodiscard]] QString statusText(core::ReadingStatus status);
[[nodiscard]] QString warningText(core::Warning warning);

} // namespace sinewright::ui

// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QColor>
#include <QFont>
#include <QPalette>
#include <QString>

namespace sinewright::ui {

enum class ThemeName { Paper, Dusk };

/// The colours of one theme. Widgets get them through palette and style sheet, plots read them here.
///
/// Whatever text is set in has at least 4.5:1 against `page` and `rail` (tst_theme); `hairline`, `grid`
/// and `wash` carry no meaning.
struct Theme
{
    QColor page;      ///< the sheet everything is set on
    QColor rail;      ///< a shade off the page, for the rail at the left
    QColor ink;       ///< sentences, figures, axis numbers
    QColor inkSoft;   ///< labels, units, notes
    QColor copper;    ///< *now*
    QColor verdigris; ///< *best*
    QColor slate;     ///< harmonics, level
    QColor alert;     ///< overload, lost source; always with a word beside it
    QColor hairline;  ///< rules between parts, axes
    QColor grid;      ///< lines within a plot
    QColor wash;      ///< what lies behind a trace: noise between its extremes, the averaged cycle
};

[[nodiscard]] const Theme& theme(ThemeName name);
[[nodiscard]] QPalette paletteOf(const Theme& theme);

/// The one style sheet of the window, made from the theme's colours.
[[nodiscard]] QString styleSheetOf(const Theme& theme);

/// Style, palette and style sheet of the whole application.
void applyTheme(ThemeName name);

/// Contrast of two opaque colours, 1 .. 21.
/// @source W3C, Web Content Accessibility Guidelines 2.1, relative luminance and contrast ratio, from memory.
[[nodiscard]] double contrastRatio(const QColor& a, const QColor& b);

/// Serif, for sentences and titles. @param pixels  logical.
[[nodiscard]] QFont sentenceFont(int pixels);

/// Sans serif, for running text and controls.
[[nodiscard]] QFont textFont(int pixels);

/// Narrow sans serif with digits of one width, for figures and axis numbers.
[[nodiscard]] QFont figureFont(int pixels);

/// The same, spaced and in capitals: the small labels over figures and plots.
[[nodiscard]] QFont labelFont(int pixels);

/// The same, light: figures to be read from across the bench.
[[nodiscard]] QFont displayFont(int pixels);

} // namespace sinewright::ui

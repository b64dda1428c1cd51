// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QLabel>
#include <QString>
#include <QVBoxLayout>

namespace sinewright::ui {

// The running text of the pages, set alike everywhere.

/// Title of a page, large serif.
[[nodiscard]] QLabel* titleLabel(const QString& text, QWidget* parent);
/// A sub-title within a page.
[[nodiscard]] QLabel* headingLabel(const QString& text, QWidget* parent);
/// A paragraph; wraps.
[[nodiscard]] QLabel* paragraphLabel(const QString& text, QWidget* parent);
/// A small label over a field, in spaced capitals.
[[nodiscard]] QLabel* fieldLabel(const QString& text, QWidget* parent);
/// A hairline across.
[[nodiscard]] QWidget* hairRule(QWidget* parent);

/// A sheet in a scroll area filling `page`, with a column of text width; returns the column to add to.
[[nodiscard]] QVBoxLayout* scrollingSheet(QWidget* page);

} // namespace sinewright::ui

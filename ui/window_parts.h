// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/bench_page.h"

class QMainWindow;
class QStackedWidget;

namespace sinewright::ui {

class Actions;
class AdviceLabel;
class ArmsLengthView;
class BottomLine;
class HookUpPage;
class Rail;
class RecordPage;
class SourceBar;
class TrimPage;

/// The widgets of the window and where they stand; all are children of the window.
class WindowParts final
{
public:
    WindowParts(QMainWindow& window, const Actions& actions);

    QStackedWidget* views; ///< the bench, or the view at arm's length
    QWidget* bench;        ///< rail, source bar, sheet and bottom line
    QWidget* sheet;        ///< advice line and page
    SourceBar* sources;
    AdviceLabel* advice;
    QStackedWidget* pages;
    HookUpPage* hookUp;
    TrimPage* trim;
    RecordPage* record;
    ArmsLengthView* arms;
    BottomLine* bottom;
    Rail* rail;

    void setTheme(const Theme& theme) const;
    void setBench(const BenchState& state) const;
    void setAdvice(const QString& sentence, bool isAlert) const;
    /// @param index  in the order of Page.
    void showPage(int index) const;
    void showArmsLength(bool isOn) const;
    [[nodiscard]] bool isAtArmsLength() const;
    /// What is seen now: a page, or the view at arm's length.
    [[nodiscard]] BenchPage* page() const;
    /// Puts the keyboard where the hand wants it: on the trimmer if there is one.
    void focusPage() const;
    /// What drawing the plots in view took lately [ms].
    [[nodiscard]] double lastDrawMs() const;

private:
    void layOut(QMainWindow& window) const;
    [[nodiscard]] QList<BenchPage*> allPages() const;
};

} // namespace sinewright::ui

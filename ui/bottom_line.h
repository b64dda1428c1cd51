// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/bench_state.h"

#include <QLabel>
#include <QTimer>
#include <QWidget>

namespace sinewright::ui {

/// Source, rate, samples lost, session file; at the right a notice that stays for ten seconds.
class BottomLine final : public QWidget
{
    Q_OBJECT
public:
    explicit BottomLine(QWidget* parent = nullptr);

    void setBenchState(const BenchState& state);
    void setFramesLost(quint64 lost);
    void showNotice(const QString& sentence);
    [[nodiscard]] QString text() const { return m_state->text(); }
    [[nodiscard]] QString notice() const { return m_notice->text(); }

private:
    void compose();

    QLabel* m_state;
    QLabel* m_lost;
    QLabel* m_notice;
    QTimer m_noticeEnds;
    BenchState m_bench;
};

} // namespace sinewright::ui

// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/bench_state.h"
#include "ui/choice_box.h"
#include "ui/level_meter.h"

#include <QList>
#include <QWidget>

namespace sinewright::ui {

/// Source, rate, channel and the level meter, over the pages.
class SourceBar final : public QWidget
{
    Q_OBJECT
public:
    explicit SourceBar(QWidget* parent = nullptr);

    void setTheme(const Theme& theme);
    void setSources(const QList<SourceChoice>& choices);
    /// Shows what is really open; says nothing.
    void setBenchState(const BenchState& state);
    [[nodiscard]] LevelMeter& meter() { return *m_meter; }
    [[nodiscard]] ChoiceBox& picker() { return *m_picker; }

    /// Asks for a file and chooses it.
    void openTake();

signals:
    void sourceChosen(const sinewright::ui::SourceChoice& choice);
    void sourcesWanted();

private:
    void fillPicker();
    void fillRates();
    void fillChannels();
    void pick(int index);
    void chooseAgain();
    QWidget* labelled(const QString& label, QWidget* field);

    ChoiceBox* m_picker;
    ChoiceBox* m_rate;
    ChoiceBox* m_channel;
    LevelMeter* m_meter;
    QList<SourceChoice> m_choices;
    BenchState m_state;
};

} // namespace sinewright::ui

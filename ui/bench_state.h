// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QList>
#include <QString>

#include <optional>

namespace sinewright::ui {

/// What kind of source is chosen; decides the icon and whether the virtual trimmer is shown.
enum class SourceKind { Demo, Card, Take };

/// One entry of the source picker, or what the user chose with it.
struct SourceChoice
{
    SourceKind kind = SourceKind::Demo;
    QString id;    ///< what the command line would call it: "demo", "card:NAME", a file's path
    QString label; ///< shown in the picker
    double rateHz = 0.0; ///< 0: the source's own
    int channel = 1;     ///< from 1
};

/// How the bench stands, for bottom line, banner and level meter.
struct BenchState
{
    enum class Condition { Starting, Running, Silent, Lost, Ended, Failed };
    Condition condition = Condition::Starting;
    SourceChoice source;
    double rateHz = 0.0;
    int channel = 1;
    int channels = 1;
    QString message; ///< what is wrong and what to try; empty while all is well
    quint64 framesLost = 0;
    QString sessionFile;              ///< empty: nothing is being stored
    std::optional<double> trimmerOhm; ///< where the virtual trimmer stands; demo only
    double trimmerLowestOhm = 0.0;
    double trimmerHighestOhm = 0.0;
};

/// Nothing comes in any more: what is shown is the last that was measured.
[[nodiscard]] inline bool isStale(const BenchState& state)
{
    using Condition = BenchState::Condition;
    return state.condition == Condition::Lost || state.condition == Condition::Ended ||
           state.condition == Condition::Failed;
}

} // namespace sinewright::ui

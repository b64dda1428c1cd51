// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "ui/bench_state.h"

#include <QCoreApplication>
#include <QString>

#include <memory>
#include <optional>

namespace sinewright::ui {

/// The one sentence in large type: what is known now and, where something is wrong, what to do.
///
/// It speaks when the facts change and else keeps still: a new state has to last before it is said (losing the
/// source, an overload, freezing are said at once), and figures in it are round and only replaced when they have
/// really moved.
class AdviceLine final
{
    Q_DECLARE_TR_FUNCTIONS(sinewright::ui::AdviceLine)
public:
    /// @param frame  null: nothing came yet.   @param nowMs  any steady clock.
    /// @return true when the sentence changed.
    bool update(const BenchState& bench, const core::Frame* frame, bool isFrozen, qint64 nowMs);

    [[nodiscard]] const QString& text() const { return m_text; }
    /// Something is wrong with the signal or its source: set in the alert colour.
    [[nodiscard]] bool isAlert() const { return m_isAlert; }

private:
    enum class Topic {
        Starting,
        Failed,
        Lost,
        Ended,
        Silent,
        Frozen,
        Overload,
        NoTone,
        TooShort,
        Moving,
        Wandering,
        Steady
    };

    [[nodiscard]] static Topic
    topicOf(const BenchState& bench, const core::Frame* frame, bool isFrozen);
    [[nodiscard]] static bool isSaidAtOnce(Topic topic);
    [[nodiscard]] QString sentence(Topic topic, const BenchState& bench, const core::Frame* frame);
    [[nodiscard]] QString steadySentence(const core::Frame& frame);

    Topic m_topic = Topic::Starting;
    Topic m_candidate = Topic::Starting;
    qint64 m_candidateSinceMs = 0;
    double m_saidHz = 0.0;
    bool m_isAtBest = false;
    QString m_text;
    bool m_isAlert = false;
};

/// How long ago, in words that change seldom: "a moment ago", "half a minute ago", "3 minutes ago".
[[nodiscard]] QString ageText(double seconds);

} // namespace sinewright::ui

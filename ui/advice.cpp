// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/advice.h"

#include "ui/figure_text.h"
#include "ui/reading_choice.h"

#include <cmath>

namespace sinewright::ui {

namespace {

constexpr qint64 kHoldMs = 700;         ///< how long a state lasts before it is said
constexpr double kNewFrequency = 0.005; ///< relative; less is the same frequency to a reader
constexpr double kReachedBest = 1.03;   ///< quick readings scatter by 3 %
constexpr double kLeftBest = 1.06;

} // namespace

bool AdviceLine::update(const BenchState& bench,
                        const core::Frame* frame,
                        bool isFrozen,
                        qint64 nowMs)
{
    const Topic topic = topicOf(bench, frame, isFrozen);
    if (topic != m_candidate) {
        m_candidate = topic;
        m_candidateSinceMs = nowMs;
    }
    if (m_text.isEmpty() || isSaidAtOnce(topic) || nowMs - m_candidateSinceMs >= kHoldMs) {
        m_topic = m_candidate;
    } else if (m_topic != Topic::Steady) {
        return false; // the old state may be gone: its sentence must not be made from the new frame
    }
    if (m_topic != m_candidate) {
        return false;
    }
    const QString text = sentence(m_topic, bench, frame);
    const bool isAlert =
        m_topic == Topic::Failed || m_topic == Topic::Lost || m_topic == Topic::Overload;
    const bool hasChanged = text != m_text || isAlert != m_isAlert;
    m_text = text;
    m_isAlert = isAlert;
    return hasChanged;
}

AdviceLine::Topic
AdviceLine::topicOf(const BenchState& bench, const core::Frame* frame, bool isFrozen)
{
    using Condition = BenchState::Condition;
    if (isFrozen) {
        return Topic::Frozen;
    }
    switch (bench.condition) {
    case Condition::Failed:
        return Topic::Failed;
    case Condition::Lost:
        return Topic::Lost;
    case Condition::Ended:
        return Topic::Ended;
    case Condition::Silent:
        return Topic::Silent;
    case Condition::Starting:
    case Condition::Running:
        break;
    }
    if (frame == nullptr) {
        return Topic::Starting;
    }
    if (isOverloaded(*frame)) {
        return Topic::Overload;
    }
    if (frame->quick.status == core::ReadingStatus::NoTone) {
        return Topic::NoTone;
    }
    if (frame->quick.status == core::ReadingStatus::TooShort) {
        return Topic::TooShort;
    }
    if (frame->full && hasWarning(*frame->full, core::Warning::UnsteadyLevel)) {
        return Topic::Moving;
    }
    if (frame->full && hasWarning(*frame->full, core::Warning::UnsteadyFrequency)) {
        return Topic::Wandering;
    }
    return Topic::Steady;
}

bool AdviceLine::isSaidAtOnce(Topic topic)
{
    return topic == Topic::Failed || topic == Topic::Lost || topic == Topic::Ended ||
           topic == Topic::Frozen || topic == Topic::Overload;
}

QString AdviceLine::sentence(Topic topic, const BenchState& bench, const core::Frame* frame)
{
    switch (topic) {
    case Topic::Starting:
        return tr("Starting to listen: the first reading is on its way.");
    case Topic::Failed:
        return bench.message.isEmpty()
                   ? tr("The source cannot be opened: choose another one above.")
                   : bench.message;
    case Topic::Lost:
        return bench.message.isEmpty() ? tr("The source went away: check its cable; listening goes "
                                            "on by itself when it is back.")
                                       : bench.message;
    case Topic::Ended:
        return tr("The take has been played to its end: choose it again to hear it once more.");
    case Topic::Silent:
        return tr("Nothing but zeros comes in: check the channel, the cable and whether the input "
                  "is muted.");
    case Topic::Frozen:
        return tr("Frozen: the figures stand still until you let them go on.");
    case Topic::Overload:
        return tr("The input is overloaded: turn the interface's gain down or put an attenuator in "
                  "front.");
    case Topic::NoTone:
        return tr(
            "No tone yet: check the cable, and whether the oscillator has its supply and runs.");
    case Topic::TooShort:
        return tr("Listening: not enough signal yet for a reading.");
    case Topic::Moving:
        return tr("The level is moving: let it settle before you judge.");
    case Topic::Wandering:
        return tr("The level holds, but the frequency is still wandering.");
    case Topic::Steady:
        return steadySentence(*frame);
    }
    return {};
}

QString AdviceLine::steadySentence(const core::Frame& frame)
{
    const core::Reading& reading = *shownReading(frame).reading;
    if (reading.frequencyHz &&
        std::abs(*reading.frequencyHz - m_saidHz) > kNewFrequency * m_saidHz) {
        m_saidHz = *reading.frequencyHz;
    }
    const QString frequency = roundFrequencyText(m_saidHz);
    if (!frame.full) {
        return tr("Listening to %1: the first full reading is on its way.").arg(frequency);
    }
    if (!frame.trend || !frame.trend->best) {
        return tr("Steady at %1: no best reading yet to compare with.").arg(frequency);
    }
    const core::BestReading& best = *frame.trend->best;
    if (reading.thdRatio) {
        m_isAtBest = *reading.thdRatio <= best.thdRatio * (m_isAtBest ? kLeftBest : kReachedBest);
    }
    const QString percent = joined(percentFigure(best.thdRatio, kQuickDigits));
    return m_isAtBest
               ? tr("Steady at %1, and as good as it has been so far: %2.").arg(frequency, percent)
               : tr("Steady at %1. It has been better: %2, %3.")
                     .arg(frequency, percent, ageText(frame.timeS - best.timeS));
}

QString ageText(double seconds)
{
    constexpr double kMomentS = 20.0;
    constexpr double kHalfMinuteS = 45.0;
    constexpr double kMinuteS = 60.0;
    constexpr double kHourS = 3600.0;
    if (seconds < kMomentS) {
        return QCoreApplication::translate("sinewright::ui::AdviceLine", "a moment ago");
    }
    if (seconds < kHalfMinuteS) {
        return QCoreApplication::translate("sinewright::ui::AdviceLine", "half a minute ago");
    }
    if (seconds < 1.5 * kMinuteS) {
        return QCoreApplication::translate("sinewright::ui::AdviceLine", "a minute ago");
    }
    if (seconds < kHourS) {
        return QCoreApplication::translate("sinewright::ui::AdviceLine", "%1 minutes ago")
            .arg(std::lround(seconds / kMinuteS));
    }
    return QCoreApplication::translate("sinewright::ui::AdviceLine", "more than an hour ago");
}

} // namespace sinewright::ui

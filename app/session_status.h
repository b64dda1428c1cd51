// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/source_spec.h"
#include "audio/card.h"
#include "audio/source.h"
#include "ui/bench_state.h"

#include <QString>

#include <functional>
#include <memory>
#include <vector>

namespace sinewright::app {

/// How the session stands: sent from [dev] to [gui] when something of it has changed.
struct SessionStatus
{
    using Condition = ui::BenchState::Condition;
    Condition condition = Condition::Starting;
    SourceSpec source{};
    double rateHz = 0.0; ///< what the source really delivers; 0 until it is open
    int channels = 0;
    QString message{}; ///< one line, what is wrong and what to try; empty while all is well
    quint64 framesLost = 0;
    quint64 serial = 0; ///< which order to open it answers
    friend bool operator==(const SessionStatus&, const SessionStatus&) = default;
};

/// Makes the source that a spec names; replaced in tests.
using SourceFactory = std::function<std::unique_ptr<audio::Source>(
    const SourceSpec& spec, std::shared_ptr<const audio::DemoTrimmer> trimmer)>;

/// Lists what can be captured from; replaced in tests.
using CardLister = std::function<core::Result<std::vector<audio::CardInfo>>()>;

} // namespace sinewright::app

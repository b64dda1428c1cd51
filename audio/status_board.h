// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/source.h"

#include <mutex>
#include <string>
#include <utility>

namespace sinewright::audio {

/// Where a source's threads write how it fares and anybody reads it. Never to be touched by a callback.
///
/// @thread any; waits at most while somebody else copies one status.
class StatusBoard final
{
public:
    void write(SourceCondition condition, std::string message = {})
    {
        const std::scoped_lock lock(m_mutex);
        m_status = SourceStatus{condition, std::move(message)};
    }

    [[nodiscard]] SourceStatus read() const
    {
        const std::scoped_lock lock(m_mutex);
        return m_status;
    }

private:
    mutable std::mutex m_mutex;
    SourceStatus m_status; ///< guarded by m_mutex
};

} // namespace sinewright::audio

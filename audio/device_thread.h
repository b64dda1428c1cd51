// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <chrono>
#include <functional>
#include <future>
#include <memory>
#include <optional>
#include <utility>

namespace sinewright::audio {

/// Does `job` on the one thread of the process that makes PortAudio's control calls, after all jobs posted before.
///
/// PortAudio's control calls must not overlap, and any of them may hang: when a PulseAudio server is frozen, aborting a
/// stream, closing it and listing the devices were each seen to wait for ever. So nobody makes such a call on a thread
/// that somebody needs; they ask, wait as long as they have patience, and leave. The thread is started on first use and
/// lives until the process ends, even when a call never comes back.
///
/// @param job  owns or shares whatever it touches, for it may run long after the caller has left.
/// @thread any; does not wait for the job.
void postToDeviceThread(std::function<void()> job);

/// As postToDeviceThread(), for a job with an answer. Dropping the future does not wait.
template <typename Job>
[[nodiscard]] auto askDeviceThread(Job job) -> std::future<decltype(job())>
{
    auto task = std::make_shared<std::packaged_task<decltype(job())()>>(std::move(job));
    auto answer = task->get_future();
    postToDeviceThread([task] { (*task)(); });
    return answer;
}

/// Waits no longer than `patience` for an answer.
template <typename T>
[[nodiscard]] std::optional<T> answerWithin(std::future<T>& answer,
                                            std::chrono::milliseconds patience)
{
    if (answer.wait_for(patience) != std::future_status::ready) {
        return std::nullopt;
    }
    return answer.get();
}

} // namespace sinewright::audio

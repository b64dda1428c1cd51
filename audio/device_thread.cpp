// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/device_thread.h"

#include <condition_variable>
#include <deque>
#include <mutex>
#include <thread>

namespace sinewright::audio {

namespace {

class JobQueue final
{
public:
    void post(std::function<void()> job)
    {
        {
            const std::scoped_lock lock(m_mutex);
            m_jobs.push_back(std::move(job));
        }
        m_hasJobs.notify_one();
    }

    [[noreturn]] void work()
    {
        for (;;) {
            // Done and gone before the next is waited for: what a job owned must not live on until then.
            const auto job = next();
            job();
        }
    }

private:
    std::function<void()> next()
    {
        std::unique_lock lock(m_mutex);
        m_hasJobs.wait(lock, [this] { return !m_jobs.empty(); });
        auto job = std::move(m_jobs.front());
        m_jobs.pop_front();
        return job;
    }

    std::mutex m_mutex;
    std::condition_variable m_hasJobs;
    std::deque<std::function<void()>> m_jobs; ///< guarded by m_mutex
};

} // namespace

void postToDeviceThread(std::function<void()> job)
{
    // Never destroyed: the thread may still be stuck in a call while the process ends.
    static JobQueue* const queue = [] {
        auto* const fresh = new JobQueue;
        std::thread([fresh] { fresh->work(); }).detach();
        return fresh;
    }();
    queue->post(std::move(job));
}

} // namespace sinewright::audio

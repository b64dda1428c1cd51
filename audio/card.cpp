// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/card.h"

#include "audio/capture_stream.h"
#include "audio/device_thread.h"
#include "audio/sample_ring.h"
#include "audio/status_board.h"

#include <cassert>
#include <chrono>
#include <optional>
#include <utility>

namespace sinewright::audio {

namespace {

using Clock = CaptureTap::Clock;
using namespace std::chrono_literals;

/// No samples for so long: the stream is dead. Blocks come every 25 ms.
constexpr auto kDeadAfter = 500ms;

/// A PulseAudio null sink's monitor was seen to give its first samples 1.9 s after the start when nothing played.
constexpr auto kFirstSamplesWithin = 4s;

/// Listing the devices costs 13 kB each time, which ALSA's plug-ins do not give back (seen with alsa-plugins 1.2.7): an
/// interface that stays away for days is therefore looked for less often after a while.
constexpr auto kRetryEvery = 1s;
constexpr auto kPatientAfter = 5min;
constexpr auto kPatientRetryEvery = 10s;
constexpr auto kOpenPatience = 10s;
constexpr auto kClosePatience = 2s;
constexpr double kSilentAfterSeconds = 1.0;

using Opened = core::Result<std::shared_ptr<CaptureStream>>;

template <typename T>
bool isReady(const std::future<T>& answer)
{
    return answer.wait_for(0s) == std::future_status::ready;
}

/// [dev] calls; the samples come on PortAudio's thread, its control calls are made on the device thread.
///
/// What was seen with a PulseAudio server behind ALSA: when it is killed the callback just stops, the stream ends by
/// itself within 0.2 s, and aborting and closing return at once. When it is frozen the callback just stops and aborting
/// waits for ever. tend() therefore never waits for the device thread.
class CardSource final : public Source
{
public:
    explicit CardSource(CardChoice choice) : m_choice(std::move(choice)) {}
    ~CardSource() override { release(); }
    CardSource(const CardSource&) = delete;
    CardSource& operator=(const CardSource&) = delete;
    CardSource(CardSource&&) = delete;
    CardSource& operator=(CardSource&&) = delete;

    core::Result<StreamFormat> open() override
    {
        stop();
        auto answer = askDeviceThread([choice = m_choice] { return CaptureStream::open(choice); });
        auto opened = answerWithin(answer, kOpenPatience);
        if (!opened) {
            return tl::unexpected(noAnswer());
        }
        if (!*opened) {
            return tl::unexpected(opened->error());
        }
        m_stream = **opened;
        m_format = m_stream->format();
        m_label = m_stream->label();
        return m_format;
    }

    core::Result<void> start(SampleRing& ring) override
    {
        assert(m_phase == Phase::Off);
        if (!m_stream) {
            if (const auto again = open(); !again) {
                return tl::unexpected(again.error());
            }
        }
        if (m_format.channels != ring.channels()) {
            release();
            return core::failure(core::ErrorCode::DeviceFailed,
                                 "input '" + m_label +
                                     "' has another number of channels than before: open it anew");
        }
        m_ring = &ring;
        m_lastHeard.reset();
        m_lostAt = Clock::now();
        auto starting = beginStarting();
        const auto started = answerWithin(starting, kOpenPatience);
        if (!started || !*started) {
            release();
            return tl::unexpected(started ? started->error() : noAnswer());
        }
        enterStreaming();
        m_board.write(SourceCondition::Running);
        return {};
    }

    void stop() override
    {
        release();
        m_board.write(SourceCondition::Idle);
    }

    void tend() override
    {
        switch (m_phase) {
        case Phase::Off:
            break;
        case Phase::Streaming:
            watch();
            break;
        case Phase::Waiting:
            if (Clock::now() >= m_nextTry) {
                m_opening = askDeviceThread(
                    [again = CardChoice{{}, m_label, m_format.rate.hz, m_format.channels}] {
                        return CaptureStream::open(again);
                    });
                m_phase = Phase::Opening;
            }
            break;
        case Phase::Opening:
            if (isReady(m_opening)) {
                adopt(m_opening.get());
            }
            break;
        case Phase::Starting:
            if (isReady(m_starting)) {
                if (m_starting.get()) {
                    enterStreaming();
                } else {
                    tryAgainLater();
                }
            }
            break;
        }
    }

    [[nodiscard]] SourceStatus status() const override { return m_board.read(); }

private:
    enum class Phase {
        Off,
        Streaming, ///< started; the first samples may still be on their way
        Waiting,   ///< lost; the next try comes at m_nextTry
        Opening,   ///< the device thread looks for the card
        Starting,  ///< the device thread starts the stream
    };

    std::future<core::Result<void>> beginStarting()
    {
        m_stream->tap().open(*m_ring, m_format, m_lastHeard);
        return askDeviceThread([stream = m_stream] { return stream->start(); });
    }

    void enterStreaming()
    {
        m_startedAt = Clock::now();
        m_phase = Phase::Streaming;
    }

    void watch()
    {
        const CaptureTap& tap = m_stream->tap();
        const bool hasCome = tap.callbacks() > 0;
        const Clock::time_point now = Clock::now();
        const bool isLate =
            hasCome ? now - tap.lastHeard() > kDeadAfter : now - m_startedAt > kFirstSamplesWithin;
        if (isLate || tap.hasEnded()) {
            lose();
            return;
        }
        if (!hasCome) {
            return;
        }
        if (static_cast<double>(tap.silentFrames()) >= kSilentAfterSeconds * m_format.rate.hz) {
            m_board.write(SourceCondition::Silent,
                          "input '" + m_label +
                              "' gives nothing but digital silence: see that the right input is "
                              "chosen and not muted");
        } else {
            m_board.write(SourceCondition::Running);
        }
    }

    /// The stream gives nothing any more.
    void lose()
    {
        if (m_stream->tap().callbacks() > 0) {
            m_lostAt = Clock::now(); // else it is the same outage still
        }
        tryAgain(0s);
    }

    void tryAgain(Clock::duration retryAfter)
    {
        dropStream();
        m_phase = Phase::Waiting;
        m_nextTry = Clock::now() + retryAfter;
        m_board.write(SourceCondition::Lost,
                      "input '" + m_label +
                          "' gives no samples any more and is being looked for: check its cable, "
                          "its power and the sound server");
    }

    void tryAgainLater()
    {
        const bool isLongGone = Clock::now() - m_lostAt > kPatientAfter;
        tryAgain(isLongGone ? Clock::duration(kPatientRetryEvery) : kRetryEvery);
    }

    void adopt(Opened opened)
    {
        if (!opened) {
            tryAgainLater();
            return;
        }
        const StreamFormat format = (*opened)->format();
        if (format.rate != m_format.rate || format.channels != m_format.channels) {
            tryAgainLater();
            m_board.write(SourceCondition::Lost,
                          "input '" + m_label +
                              "' is back with another rate or fewer channels: choose it anew");
            return;
        }
        m_stream = *opened;
        m_starting = beginStarting();
        m_phase = Phase::Starting;
    }

    /// From here on the ring is left alone; the device thread closes the stream when it gets to it.
    void dropStream()
    {
        if (!m_stream) {
            return;
        }
        CaptureTap& tap = m_stream->tap();
        tap.shut();
        if (tap.callbacks() > 0) {
            m_lastHeard = tap.lastHeard();
        }
        m_stream.reset();
    }

    void release()
    {
        const bool isInUse = m_stream != nullptr || m_phase != Phase::Off;
        dropStream();
        m_opening = {};
        m_starting = {};
        m_ring = nullptr;
        m_phase = Phase::Off;
        if (isInUse) {
            // So that the device is free for whoever opens it next; a stuck one is left to itself.
            const auto closed = askDeviceThread([] {});
            static_cast<void>(closed.wait_for(kClosePatience));
        }
    }

    // constant after construction
    CardChoice m_choice;
    // [dev] only
    Phase m_phase = Phase::Off;
    StreamFormat m_format;
    std::string m_label;
    std::shared_ptr<CaptureStream> m_stream;
    SampleRing* m_ring = nullptr;
    std::optional<Clock::time_point> m_lastHeard; ///< of a stream that was lost
    Clock::time_point m_startedAt;
    Clock::time_point m_lostAt;
    Clock::time_point m_nextTry;
    std::future<Opened> m_opening;
    std::future<core::Result<void>> m_starting;
    // any thread
    StatusBoard m_board;
};

} // namespace

std::unique_ptr<Source> makeCardSource(CardChoice choice)
{
    return std::make_unique<CardSource>(std::move(choice));
}

} // namespace sinewright::audio

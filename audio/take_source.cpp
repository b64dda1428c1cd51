// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/sample_ring.h"
#include "audio/status_board.h"
#include "audio/take_file.h"

#include <algorithm>
#include <cassert>
#include <chrono>
#include <cmath>
#include <optional>
#include <span>
#include <stop_token>
#include <thread>
#include <utility>
#include <vector>

namespace sinewright::audio {

namespace {

/// About what an interface delivers at a time: short enough for quick readings, long enough to sleep between.
constexpr double kBlockSeconds = 0.01;

/// Copies to the ring's float. A value float cannot hold is no number either.
///
/// @return where the first sample that is no number stands, if there is one.
std::optional<std::size_t> toFloat(std::span<const double> from, std::span<float> to)
{
    for (std::size_t i = 0; i < from.size(); ++i) {
        to[i] = static_cast<float>(from[i]);
        if (!std::isfinite(to[i])) {
            return i;
        }
    }
    return std::nullopt;
}

/// [dev] calls, and one thread of its own that reads the file and pushes.
class TakeSource final : public Source
{
public:
    explicit TakeSource(std::filesystem::path file) : m_file(std::move(file)) {}
    ~TakeSource() override { stopPlaying(); }
    TakeSource(const TakeSource&) = delete;
    TakeSource& operator=(const TakeSource&) = delete;
    TakeSource(TakeSource&&) = delete;
    TakeSource& operator=(TakeSource&&) = delete;

    core::Result<StreamFormat> open() override
    {
        stop();
        auto take = openTake(m_file);
        if (!take) {
            return tl::unexpected(take.error());
        }
        m_take = std::move(*take);
        return StreamFormat{m_take->info.rate, m_take->info.channels};
    }

    core::Result<void> start(SampleRing& ring) override
    {
        assert(m_take && m_take->info.channels == ring.channels());
        assert(!m_player.joinable());
        if (sf_seek(m_take->handle.get(), 0, SF_SEEK_SET) < 0) {
            return core::failure(core::ErrorCode::Damaged,
                                 m_take->name + " cannot be played from its start: open it again");
        }
        m_take->nextFrame = 0;
        m_board.write(SourceCondition::Running);
        m_player = std::jthread([this, &ring](const std::stop_token& stopped) {
            m_board.write(SourceCondition::Ended, play(stopped, ring));
        });
        return {};
    }

    void stop() override
    {
        stopPlaying();
        m_board.write(SourceCondition::Idle);
    }

    [[nodiscard]] SourceStatus status() const override { return m_board.read(); }

private:
    void stopPlaying()
    {
        if (m_player.joinable()) {
            m_player.request_stop();
            m_player.join();
        }
    }

    /// Until the end or the stop. Late wake-ups are caught up with: the pace is counted from the start.
    ///
    /// @return why it ended early; empty at the end of the take.
    std::string play(const std::stop_token& stopped, SampleRing& ring)
    {
        using Clock = std::chrono::steady_clock;
        TakeFile& take = *m_take;
        const auto channels = static_cast<std::size_t>(take.info.channels);
        const auto blockFrames =
            std::max<std::size_t>(1, static_cast<std::size_t>(take.info.rate.hz * kBlockSeconds));
        std::vector<double> read(blockFrames * channels);
        std::vector<float> block(read.size());
        const Clock::time_point begin = Clock::now();
        while (!stopped.stop_requested()) {
            const std::uint64_t firstFrame = take.nextFrame;
            const auto got = readNext(take, read);
            if (!got) {
                return got.error().detail;
            }
            if (*got == 0) {
                return {};
            }
            const std::span<const double> fresh = std::span(read).first(*got * channels);
            if (const auto bad = toFloat(fresh, block)) {
                return notFinite(take,
                                 firstFrame + *bad / channels,
                                 static_cast<int>(*bad % channels) + 1)
                    .detail;
            }
            // A block is there when its last frame has been "sampled", as with an interface.
            const std::chrono::duration<double> due(static_cast<double>(take.nextFrame) /
                                                    take.info.rate.hz);
            std::this_thread::sleep_until(begin + std::chrono::duration_cast<Clock::duration>(due));
            ring.push(block.data(), *got);
        }
        return {};
    }

    // constant after construction
    std::filesystem::path m_file;
    // [dev], and the player while it plays
    std::optional<TakeFile> m_take;
    StatusBoard m_board;
    std::jthread m_player;
};

} // namespace

std::unique_ptr<Source> makeTakeSource(std::filesystem::path file)
{
    return std::make_unique<TakeSource>(std::move(file));
}

} // namespace sinewright::audio

// SPDX-License-Identifier: GPL-3.0-or-later
// Does a long capture lose samples that it does not count?
//
//   card_soak SECONDS
//
// Plays a stream into the virtual card whose left channel is a tone and whose right channel numbers the frames, captures
// it through PortAudio beside a thread that keeps one core busy, and looks at every frame: the numbers must follow one
// another and the tone must have the phase that its number says, bit by bit. A jump where the ring marks a gap is a
// counted loss, any other jump an uncounted one. Silence that the player let happen is told apart: it hides no number.
//
// Prints lines `name | value | bar | met`; exit 0 when every bar is met, 1 when not, 77 without PulseAudio.
#include "audio/card.h"
#include "audio/sample_ring.h"

#include <QCoreApplication>

#include <array>
#include <atomic>
#include <chrono>
#include <cmath>
#include <csignal>
#include <cstdint>
#include <cstdio>
#include <cstdlib>
#include <numbers>
#include <optional>
#include <thread>
#include <vector>

#include "tests/support/figure.h"
#include "tests/support/virtual_card.h"

using namespace sinewright;
using namespace std::chrono_literals;
using namespace Qt::StringLiterals;
using tests::VirtualCard;

namespace {

using Clock = std::chrono::steady_clock;

constexpr int kExitSkipped = 77; // what CTest is told to take for "skipped"
constexpr std::size_t kChunkFrames = 4800;
constexpr double kToneHz = 997.1;

/// Numbers 1 .. 2^23 as a fraction are exact in float and never zero.
constexpr std::uint64_t kNumbers = std::uint64_t{1} << 23U;

float numberOf(std::uint64_t frame)
{
    return static_cast<float>(frame % kNumbers + 1) / static_cast<float>(kNumbers);
}

float toneOf(std::uint64_t frame)
{
    const double turns = kToneHz * static_cast<double>(frame % kNumbers) / VirtualCard::kRateHz;
    return static_cast<float>(0.5 * std::sin(2.0 * std::numbers::pi * turns));
}

/// Feeds the player until told to stop; the player's pace sets its own.
void playStream(const std::atomic<bool>& isOver)
{
    std::FILE* const player =
        ::popen("exec pacat --playback --raw --format=float32le --rate=96000 --channels=2", "w");
    if (player == nullptr) {
        return;
    }
    std::array<float, 2 * kChunkFrames> chunk{};
    for (std::uint64_t frame = 0; !isOver.load();) {
        for (std::size_t i = 0; i < kChunkFrames; ++i, ++frame) {
            chunk.at(2 * i) = toneOf(frame);
            chunk.at(2 * i + 1) = numberOf(frame);
        }
        if (std::fwrite(chunk.data(), sizeof(float), chunk.size(), player) != chunk.size()) {
            break;
        }
    }
    ::pclose(player);
}

void keepBusy(const std::atomic<bool>& isOver)
{
    std::uint64_t turns = 0;
    while (!isOver.load(std::memory_order_relaxed)) {
        ++turns;
    }
}

/// What the frames themselves tell.
class Inspector final
{
public:
    void look(const audio::RingBlock& block)
    {
        bool isGapMarked = block.lostBefore > 0;
        m_gaps += isGapMarked ? 1U : 0U;
        for (std::size_t i = 0; i + 1 < block.interleaved.size(); i += 2) {
            isGapMarked = lookAt(block.interleaved[i], block.interleaved[i + 1], isGapMarked);
        }
    }

    [[nodiscard]] std::uint64_t checked() const { return m_checked; }
    [[nodiscard]] std::uint64_t gaps() const { return m_gaps; }
    [[nodiscard]] std::uint64_t uncounted() const { return m_uncounted; }
    [[nodiscard]] std::uint64_t altered() const { return m_altered; }
    [[nodiscard]] std::uint64_t playerSilence() const { return m_playerSilence; }

private:
    /// @return whether a marked gap still excuses the next number.
    bool lookAt(float tone, float number, bool isGapMarked)
    {
        if (number == 0.0F) {
            m_playerSilence += m_expected ? 1U : 0U;
            return isGapMarked;
        }
        const auto place = static_cast<std::uint64_t>(std::llround(static_cast<double>(number) *
                                                                   static_cast<double>(kNumbers))) -
                           1;
        if (m_expected && place != *m_expected && !isGapMarked) {
            m_uncounted += (place + kNumbers - *m_expected) % kNumbers;
        }
        m_altered += tone == toneOf(place) && number == numberOf(place) ? 0U : 1U;
        m_expected = (place + 1) % kNumbers;
        ++m_checked;
        return false;
    }

    std::optional<std::uint64_t> m_expected;
    std::uint64_t m_checked = 0;
    std::uint64_t m_gaps = 0;
    std::uint64_t m_uncounted = 0;
    std::uint64_t m_altered = 0;
    std::uint64_t m_playerSilence = 0;
};

/// Captures and inspects for `length` from the first numbered frame on.
bool capture(Inspector& inspector, audio::SampleRing& ring, std::chrono::duration<double> length)
{
    const auto source = audio::makeCardSource({{}, "pulse", VirtualCard::kRateHz, 2});
    const auto opened = source->open();
    const auto started = opened ? source->start(ring) : tl::unexpected(opened.error());
    if (!started) {
        std::fprintf(stderr, "card_soak: %s\n", started.error().detail.c_str());
        return false;
    }
    Clock::time_point end = Clock::now() + 20s; // for the first frame to come
    bool hasBegun = false;
    for (int turn = 0; Clock::now() < end; ++turn) {
        while (const auto block = ring.pop()) {
            inspector.look(*block);
        }
        if (!hasBegun && inspector.checked() > 0) {
            hasBegun = true;
            end = Clock::now() + std::chrono::duration_cast<Clock::duration>(length);
        }
        if (turn % 20 == 0) {
            source->tend();
        }
        std::this_thread::sleep_for(10ms);
    }
    source->stop();
    while (const auto block = ring.pop()) {
        inspector.look(*block);
    }
    return true;
}

bool print(const QString& name, std::uint64_t value, const QString& bar, bool isMet)
{
    std::puts(qPrintable(tests::figureLine(name, QString::number(value), bar, isMet)));
    return isMet;
}

} // namespace

int main(int argc, char** argv)
{
    const QCoreApplication application(argc, argv);
    const double seconds = argc == 2 ? std::strtod(argv[1], nullptr) : 0.0;
    if (!(seconds > 0.0)) {
        std::fprintf(stderr, "usage: card_soak SECONDS\n");
        return 2;
    }
    if (const QString missing = VirtualCard::missingProgram(); !missing.isEmpty()) {
        std::fprintf(stderr, "card_soak: skipped, for %s is missing\n", qPrintable(missing));
        return kExitSkipped;
    }
    VirtualCard card;
    card.useInThisProcess();
    if (!card.start()) {
        std::fprintf(stderr, "card_soak: %s\n", qPrintable(card.whatFailed()));
        return 1;
    }
    std::signal(SIGPIPE, SIG_IGN);
    std::atomic<bool> isOver{false};
    std::thread player(playStream, std::cref(isOver));
    std::thread burner(keepBusy, std::cref(isOver));
    Inspector inspector;
    audio::SampleRing ring(2, static_cast<std::size_t>(VirtualCard::kRateHz)); // one second
    const bool isCaptured = capture(inspector, ring, std::chrono::duration<double>(seconds));
    isOver = true;
    burner.join();
    player.join();
    if (!isCaptured) {
        return 1;
    }
    // The player may have been late with a tenth of it: what counts is what was played.
    const double wanted = 0.9 * seconds * VirtualCard::kRateHz;
    const bool areMet[] = {print(u"capture beside a busy core: frames checked"_s,
                                 inspector.checked(),
                                 u"the time asked for"_s,
                                 static_cast<double>(inspector.checked()) >= wanted),
                           print(u"capture beside a busy core: samples lost and counted"_s,
                                 ring.framesLost(),
                                 u"0, or each counted"_s,
                                 (ring.framesLost() > 0) == (inspector.gaps() > 0)),
                           print(u"capture beside a busy core: samples lost and not counted"_s,
                                 inspector.uncounted(),
                                 u"0"_s,
                                 inspector.uncounted() == 0),
                           print(u"capture beside a busy core: samples altered"_s,
                                 inspector.altered(),
                                 u"0"_s,
                                 inspector.altered() == 0)};
    std::printf("gaps marked: %llu; silent frames let happen by the player: %llu\n",
                static_cast<unsigned long long>(inspector.gaps()),
                static_cast<unsigned long long>(inspector.playerSilence()));
    bool isGood = true;
    for (const bool isMet : areMet) {
        isGood = isGood && isMet;
    }
    return isGood ? 0 : 1;
}

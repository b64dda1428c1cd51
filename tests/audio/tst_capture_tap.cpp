// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/capture_tap.h"
#include "audio/sample_ring.h"

#include <QTest>

#include <atomic>
#include <chrono>
#include <thread>
#include <vector>

using namespace sinewright;
using audio::captureCallback;
using audio::CaptureTap;
using audio::RingBlock;
using audio::SampleRing;
using namespace std::chrono_literals;

namespace {

constexpr double kRateHz = 96000.0;
const audio::StreamFormat kFormat{core::SampleRate{kRateHz}, 2};
constexpr std::size_t kBlock = 480;

void call(CaptureTap& tap, const std::vector<float>& stereo, PaStreamCallbackFlags flags = 0)
{
    const int outcome =
        captureCallback(stereo.data(), nullptr, stereo.size() / 2, nullptr, flags, &tap);
    QCOMPARE(outcome, int(paContinue));
}

} // namespace

class TestCaptureTap final : public QObject
{
    Q_OBJECT

private slots:
    void samples_areCopiedAndCounted();
    void overflow_isMarkedAsAGapOfTheTimeThatPassed();
    void outage_isMarkedAsAGapOfTheTimeThatPassed();
    void silence_isCountedWhileEverySampleIsZero();
    void missingInput_isCountedAsLost();
    void shutTap_leavesTheRingAlone();
    void shuttingBesideARunningCallback_isClean();
};

void TestCaptureTap::samples_areCopiedAndCounted()
{
    SampleRing ring(2, 10 * kBlock);
    CaptureTap tap;
    tap.open(ring, kFormat, std::nullopt);
    std::vector<float> block(2 * kBlock);
    for (std::size_t i = 0; i < block.size(); ++i) {
        block[i] = static_cast<float>(i);
    }
    QCOMPARE(tap.callbacks(), 0U);
    call(tap, block);
    QCOMPARE(tap.callbacks(), 1U);
    const auto out = ring.pop();
    QVERIFY(out.has_value());
    QVERIFY(out->interleaved == block);
    QCOMPARE(out->firstFrame, 0U);
    QCOMPARE(out->lostBefore, 0U);
}

void TestCaptureTap::overflow_isMarkedAsAGapOfTheTimeThatPassed()
{
    SampleRing ring(2, 10 * kBlock);
    CaptureTap tap;
    tap.open(ring, kFormat, std::nullopt);
    const std::vector<float> block(2 * kBlock, 0.5F);
    call(tap, block);
    call(tap,
         block,
         paInputOverflow); // at once: no time for even this block, yet something is missing
    QCOMPARE(ring.pop().value_or(RingBlock{}).lostBefore, 0U);
    QCOMPARE(ring.pop().value_or(RingBlock{}).lostBefore, 1U);
    QCOMPARE(ring.framesLost(), 1U);
}

void TestCaptureTap::outage_isMarkedAsAGapOfTheTimeThatPassed()
{
    SampleRing ring(2, 10 * kBlock);
    CaptureTap tap;
    const auto heard = CaptureTap::Clock::now() - 2s;
    tap.open(ring, kFormat, heard);
    const std::vector<float> block(2 * kBlock, 0.5F);
    call(tap, block);
    const std::chrono::duration<double> latest = CaptureTap::Clock::now() - heard;
    const double missing = static_cast<double>(ring.pop().value_or(RingBlock{}).lostBefore);
    // Two seconds less the block that came; the upper end is what the clock says after the call.
    QCOMPARE_GE(missing, 2.0 * kRateHz - kBlock - 1.0);
    QCOMPARE_LE(missing, latest.count() * kRateHz - kBlock);
    call(tap, block);
    QCOMPARE(ring.pop().value_or(RingBlock{}).lostBefore, 0U); // told once
}

void TestCaptureTap::silence_isCountedWhileEverySampleIsZero()
{
    SampleRing ring(2, 10 * kBlock);
    CaptureTap tap;
    tap.open(ring, kFormat, std::nullopt);
    std::vector<float> block(2 * kBlock, 0.0F);
    block[7] = -0.0F; // zero all the same
    call(tap, block);
    call(tap, block);
    QCOMPARE(tap.silentFrames(), 2 * kBlock);
    block.back() = 1e-30F;
    call(tap, block);
    QCOMPARE(tap.silentFrames(), 0U);
}

void TestCaptureTap::missingInput_isCountedAsLost()
{
    SampleRing ring(2, 10 * kBlock);
    CaptureTap tap;
    tap.open(ring, kFormat, std::nullopt);
    captureCallback(nullptr, nullptr, kBlock, nullptr, 0, &tap);
    QCOMPARE(ring.framesLost(), kBlock);
}

void TestCaptureTap::shutTap_leavesTheRingAlone()
{
    SampleRing ring(2, 10 * kBlock);
    CaptureTap tap;
    const std::vector<float> block(2 * kBlock, 0.5F);
    call(tap, block); // not opened yet
    tap.open(ring, kFormat, std::nullopt);
    tap.shut();
    tap.shut();
    call(tap, block, paInputOverflow);
    QCOMPARE(ring.framesSeen(), 0U);
    QCOMPARE(tap.callbacks(), 0U);
}

void TestCaptureTap::shuttingBesideARunningCallback_isClean()
{
    // The ring dies right after shut(): a callback that still used it would be caught by a sanitizer build.
    for (int round = 0; round < 100; ++round) {
        CaptureTap tap;
        std::atomic<bool> isOver{false};
        const std::vector<float> block(2 * kBlock, 0.5F);
        std::thread caller;
        {
            SampleRing ring(2, 4 * kBlock);
            tap.open(ring, kFormat, std::nullopt);
            caller = std::thread([&] {
                while (!isOver.load()) {
                    captureCallback(block.data(), nullptr, kBlock, nullptr, 0, &tap);
                    std::this_thread::yield();
                }
            });
            while (tap.callbacks() == 0) {
                std::this_thread::yield();
            }
            tap.shut();
            const std::uint64_t seen = ring.framesSeen();
            QCOMPARE(ring.framesSeen(), seen);
        }
        const std::uint64_t callbacks = tap.callbacks();
        isOver.store(true);
        caller.join();
        QCOMPARE(tap.callbacks(), callbacks);
    }
}

QTEST_APPLESS_MAIN(TestCaptureTap)
#include "tst_capture_tap.moc"

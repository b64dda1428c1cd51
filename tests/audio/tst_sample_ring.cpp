// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/sample_ring.h"

#include <QTest>

#include <atomic>
#include <numeric>
#include <random>
#include <thread>
#include <vector>

using sinewright::audio::RingBlock;
using sinewright::audio::SampleRing;

namespace {

// What the callback relies on.
static_assert(noexcept(std::declval<SampleRing&>().push(nullptr, 0)));
static_assert(noexcept(std::declval<SampleRing&>().addLoss(0)));
static_assert(noexcept(std::declval<const SampleRing&>().framesLost()));
static_assert(noexcept(std::declval<const SampleRing&>().framesSeen()));
static_assert(std::atomic<std::uint64_t>::is_always_lock_free);
static_assert(std::atomic<std::size_t>::is_always_lock_free);

/// A frame's samples tell its number and channel. Exact in float up to 2^24.
constexpr std::uint64_t kExactInFloat = std::uint64_t{1} << 24U;

float stamp(std::uint64_t frame, std::size_t channel, std::size_t channels)
{
    return static_cast<float>((frame * channels + channel) % kExactInFloat);
}

std::vector<float> stamped(std::uint64_t firstFrame, std::size_t frames, std::size_t channels)
{
    std::vector<float> samples;
    samples.reserve(frames * channels);
    for (std::size_t i = 0; i < frames; ++i) {
        for (std::size_t c = 0; c < channels; ++c) {
            samples.push_back(stamp(firstFrame + i, c, channels));
        }
    }
    return samples;
}

/// Pushes random block lengths as fast as it can; counts what was offered.
void pushFrames(SampleRing& ring, std::uint64_t total, std::size_t channels, unsigned seed)
{
    std::mt19937 random(seed);
    std::uniform_int_distribution<std::size_t> length(1, 300);
    std::uint64_t next = 0;
    while (next < total) {
        const std::size_t frames = length(random);
        const auto samples = stamped(next, frames, channels);
        ring.push(samples.data(), frames);
        next += frames;
        if (random() % 4 == 0) {
            std::this_thread::yield();
        }
    }
}

} // namespace

class TestSampleRing final : public QObject
{
    Q_OBJECT

private slots:
    void init() { QTest::failOnWarning(QRegularExpression(QStringLiteral(".*"))); }
    void blocks_comeOutInOrderWithTheirNumbers();
    void fullRing_dropsTheNewBlockWholeAndMarksTheGap();
    void fullHeaderQueue_countsAsFull();
    void lossBeforeTheRing_isMarkedOnTheNextBlock();
    void emptyPush_changesNothing();
    void twoThreads_loseNothingUncounted_data();
    void twoThreads_loseNothingUncounted();
};

void TestSampleRing::blocks_comeOutInOrderWithTheirNumbers()
{
    SampleRing ring(2, 100);
    QVERIFY(!ring.pop());
    std::uint64_t next = 0;
    // Three times round the ring, so that blocks straddle its seam.
    for (const std::size_t frames : {30U, 47U, 1U, 64U, 99U, 100U}) {
        const auto in = stamped(next, frames, 2);
        ring.push(in.data(), frames);
        const auto out = ring.pop();
        QVERIFY(out.has_value());
        QCOMPARE(out->firstFrame, next);
        QCOMPARE(out->lostBefore, 0U);
        QVERIFY(out->interleaved == in);
        next += frames;
    }
    QVERIFY(!ring.pop());
    QCOMPARE(ring.framesSeen(), next);
    QCOMPARE(ring.framesLost(), 0U);
}

void TestSampleRing::fullRing_dropsTheNewBlockWholeAndMarksTheGap()
{
    SampleRing ring(2, 100);
    const auto samples = stamped(0, 240, 2);
    ring.push(samples.data(), 60);       // 0 .. 59
    ring.push(samples.data() + 120, 60); // 60 .. 119: 40 would fit, so none go in
    ring.push(samples.data() + 240, 50); // 120 .. 169
    ring.push(samples.data() + 340, 40); // 170 .. 209: fits
    QCOMPARE(ring.framesLost(), 110U);
    QCOMPARE(ring.framesSeen(), 210U);

    const auto first = ring.pop();
    const auto second = ring.pop();
    QVERIFY(first && second && !ring.pop());
    QCOMPARE(first->firstFrame, 0U);
    QCOMPARE(first->lostBefore, 0U);
    QCOMPARE(second->firstFrame, 170U);
    QCOMPARE(second->lostBefore, 110U);
    QVERIFY(second->interleaved == stamped(170, 40, 2));

    ring.push(samples.data() + 420, 10); // the gap is told once
    const auto third = ring.pop();
    QVERIFY(third.has_value());
    QCOMPARE(third->firstFrame, 210U);
    QCOMPARE(third->lostBefore, 0U);
}

void TestSampleRing::fullHeaderQueue_countsAsFull()
{
    SampleRing ring(1, 1000);
    const float one = 1.0F;
    std::uint64_t kept = 0;
    while (ring.framesLost() == 0) {
        ring.push(&one, 1);
        kept = ring.framesSeen() - ring.framesLost();
        QVERIFY(ring.framesSeen() <= 1000); // else the header queue was never full
    }
    QVERIFY(kept < 1000);
    for (std::uint64_t i = 0; i < kept; ++i) {
        const auto block = ring.pop();
        QVERIFY(block.has_value());
        QCOMPARE(block->firstFrame, i);
        QCOMPARE(block->interleaved.size(), 1U);
    }
    QVERIFY(!ring.pop());
    ring.push(&one, 1);
    QCOMPARE(ring.pop().value_or(RingBlock{}).lostBefore, 1U);
}

void TestSampleRing::lossBeforeTheRing_isMarkedOnTheNextBlock()
{
    SampleRing ring(1, 100);
    const auto samples = stamped(0, 20, 1);
    ring.push(samples.data(), 10);
    ring.addLoss(7);
    ring.addLoss(5);
    ring.push(samples.data(), 10);
    QCOMPARE(ring.pop().value_or(RingBlock{}).lostBefore, 0U);
    const auto after = ring.pop();
    QVERIFY(after.has_value());
    QCOMPARE(after->lostBefore, 12U);
    QCOMPARE(after->firstFrame, 22U);
    QCOMPARE(ring.framesLost(), 12U);
    QCOMPARE(ring.framesSeen(), 32U);
}

void TestSampleRing::emptyPush_changesNothing()
{
    SampleRing ring(1, 10);
    ring.push(nullptr, 0);
    QVERIFY(!ring.pop());
    QCOMPARE(ring.framesSeen(), 0U);
}

void TestSampleRing::twoThreads_loseNothingUncounted_data()
{
    QTest::addColumn<int>("channels");
    QTest::addColumn<int>("capacityFrames");
    QTest::addColumn<bool>("mustLose"); // a ring of one block cannot keep up with a hasty pusher
    QTest::newRow("mono, roomy") << 1 << (1 << 21) << false;
    QTest::newRow("stereo, tight") << 2 << 300 << true;
    QTest::newRow("32 channels, tight") << 32 << 300 << true;
}

void TestSampleRing::twoThreads_loseNothingUncounted()
{
    QFETCH(const int, channels);
    QFETCH(const int, capacityFrames);
    QFETCH(const bool, mustLose);
    constexpr std::uint64_t kTotal = 200'000;
    constexpr unsigned kSeed = 20'240'601;
    SampleRing ring(channels, static_cast<std::size_t>(capacityFrames));
    std::atomic<bool> isDone{false};
    std::thread pusher([&] {
        pushFrames(ring, kTotal, static_cast<std::size_t>(channels), kSeed);
        isDone.store(true, std::memory_order_release);
    });

    std::uint64_t expected = 0;
    std::uint64_t lost = 0;
    std::uint64_t wrong = 0;
    for (;;) {
        const bool wasDone = isDone.load(std::memory_order_acquire);
        const auto block = ring.pop();
        if (!block && wasDone) {
            break;
        }
        if (!block) {
            std::this_thread::yield();
            continue;
        }
        const auto width = static_cast<std::size_t>(channels);
        expected += block->lostBefore;
        lost += block->lostBefore;
        wrong += block->firstFrame == expected ? 0U : 1U;
        const std::size_t frames = block->interleaved.size() / width;
        wrong += block->interleaved == stamped(block->firstFrame, frames, width) ? 0U : 1U;
        expected += frames;
    }
    pusher.join();
    QCOMPARE(wrong, 0U);
    // What was dropped after the last block that fitted is counted though no block carries it.
    QVERIFY(ring.framesLost() >= lost);
    QCOMPARE(ring.framesSeen(), expected + (ring.framesLost() - lost));
    QVERIFY(ring.framesSeen() >= kTotal);
    QCOMPARE(ring.framesLost() > 0, mustLose);
}

QTEST_APPLESS_MAIN(TestSampleRing)
#include "tst_sample_ring.moc"

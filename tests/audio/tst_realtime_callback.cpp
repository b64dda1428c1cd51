// SPDX-License-Identifier: GPL-3.0-or-later
// Nothing allocates or locks within the callback: neither when it is called here, nor when PortAudio calls it during a
// capture. This program puts itself before the C library (malloc and its family, which operator new uses, and the ways
// to wait for a lock) and before Pa_OpenStream, where it wraps whatever callback is registered. So the program under
// test needs no hook for it.
#include "audio/capture_tap.h"
#include "audio/card.h"
#include "audio/sample_ring.h"

#include <portaudio.h>

#include <QTest>

#include <atomic>
#include <memory>
#include <mutex>
#include <shared_mutex>
#include <string>
#include <vector>

#include "tests/support/figure.h"
#include "tests/support/virtual_card.h"
#include <dlfcn.h>
#include <pthread.h>
#include <semaphore.h>

namespace {

thread_local int callbackDepth = 0;
std::atomic<int> callbacksRun{0};
std::atomic<int> allocations{0};
std::atomic<int> locks{0};

void countAllocation()
{
    allocations.fetch_add(callbackDepth > 0 ? 1 : 0);
}

void countLock()
{
    locks.fetch_add(callbackDepth > 0 ? 1 : 0);
}

/// The definition that this program's own stands before.
template <typename Function>
Function* original(const char* name)
{
    return reinterpret_cast<Function*>(::dlsym(RTLD_NEXT, name));
}

/// What one stream was opened with. One stream at a time is enough here.
PaStreamCallback* wrappedCallback = nullptr;

int guardedCallback(const void* input,
                    void* output,
                    unsigned long frames,
                    const PaStreamCallbackTimeInfo* time,
                    PaStreamCallbackFlags flags,
                    void* user)
{
    ++callbackDepth;
    const int outcome = wrappedCallback(input, output, frames, time, flags, user);
    --callbackDepth;
    callbacksRun.fetch_add(1);
    return outcome;
}

} // namespace

extern "C" {

// NOLINTBEGIN(readability-identifier-naming, bugprone-reserved-identifier): names of the C library
void* __libc_malloc(std::size_t size);
void* __libc_calloc(std::size_t count, std::size_t size);
void* __libc_realloc(void* old, std::size_t size);
void* __libc_memalign(std::size_t alignment, std::size_t size);
void __libc_free(void* block);
// NOLINTEND(readability-identifier-naming, bugprone-reserved-identifier)

void* malloc(std::size_t size)
{
    countAllocation();
    return __libc_malloc(size);
}

void* calloc(std::size_t count, std::size_t size)
{
    countAllocation();
    return __libc_calloc(count, size);
}

void* realloc(void* old, std::size_t size)
{
    countAllocation();
    return __libc_realloc(old, size);
}

void* aligned_alloc(std::size_t alignment, std::size_t size)
{
    countAllocation();
    return __libc_memalign(alignment, size);
}

void free(void* block)
{
    countAllocation();
    __libc_free(block);
}

int pthread_mutex_lock(pthread_mutex_t* mutex)
{
    static auto* const next = original<decltype(pthread_mutex_lock)>("pthread_mutex_lock");
    countLock();
    return next(mutex);
}

int pthread_rwlock_rdlock(pthread_rwlock_t* lock)
{
    static auto* const next = original<decltype(pthread_rwlock_rdlock)>("pthread_rwlock_rdlock");
    countLock();
    return next(lock);
}

int pthread_rwlock_wrlock(pthread_rwlock_t* lock)
{
    static auto* const next = original<decltype(pthread_rwlock_wrlock)>("pthread_rwlock_wrlock");
    countLock();
    return next(lock);
}

int sem_wait(sem_t* semaphore)
{
    static auto* const next = original<decltype(sem_wait)>("sem_wait");
    countLock();
    return next(semaphore);
}

PaError Pa_OpenStream(PaStream** stream,
                      const PaStreamParameters* input,
                      const PaStreamParameters* output,
                      double rateHz,
                      unsigned long frames,
                      PaStreamFlags flags,
                      PaStreamCallback* callback,
                      void* user)
{
    wrappedCallback = callback;
    return original<decltype(Pa_OpenStream)>("Pa_OpenStream")(
        stream, input, output, rateHz, frames, flags, guardedCallback, user);
}

} // extern "C"

using namespace sinewright;
using audio::CaptureTap;
using audio::SampleRing;
using tests::VirtualCard;

namespace {

constexpr double kRateHz = 96000.0;
const audio::StreamFormat kFormat{core::SampleRate{kRateHz}, 2};
constexpr unsigned long kBlock = 480;

void resetCounts()
{
    callbacksRun = 0;
    allocations = 0;
    locks = 0;
}

/// Keeps the compiler from leaving the allocation out.
std::atomic<void*> escaped{nullptr};

int allocatingCallback(const void*,
                       void*,
                       unsigned long,
                       const PaStreamCallbackTimeInfo*,
                       PaStreamCallbackFlags,
                       void*)
{
    const auto block = std::make_unique<int>(1);
    escaped = block.get();
    return paContinue;
}

int growingCallback(const void* input,
                    void*,
                    unsigned long frames,
                    const PaStreamCallbackTimeInfo*,
                    PaStreamCallbackFlags,
                    void*)
{
    const auto* const samples = static_cast<const float*>(input);
    std::vector<float> copy(samples, samples + frames);
    escaped = copy.data();
    return paContinue;
}

int lockingCallback(const void*,
                    void*,
                    unsigned long,
                    const PaStreamCallbackTimeInfo*,
                    PaStreamCallbackFlags,
                    void*)
{
    static std::mutex mutex;
    const std::scoped_lock lock(mutex);
    return paContinue;
}

int sharedLockingCallback(const void*,
                          void*,
                          unsigned long,
                          const PaStreamCallbackTimeInfo*,
                          PaStreamCallbackFlags,
                          void*)
{
    static std::shared_mutex mutex;
    const std::shared_lock lock(mutex);
    return paContinue;
}

void callGuarded(PaStreamCallback* callback,
                 const std::vector<float>& stereo,
                 PaStreamCallbackFlags flags,
                 void* user)
{
    wrappedCallback = callback;
    guardedCallback(stereo.data(), nullptr, kBlock, nullptr, flags, user);
}

} // namespace

class TestRealtimeCallback final : public QObject
{
    Q_OBJECT

private slots:
    void badCallback_isCaught_data();
    void badCallback_isCaught();
    void captureCallback_neitherAllocatesNorLocks_data();
    void captureCallback_neitherAllocatesNorLocks();
    void captureThroughPortAudio_neitherAllocatesNorLocks();
};

void TestRealtimeCallback::badCallback_isCaught_data()
{
    QTest::addColumn<void*>("callback");
    QTest::addColumn<bool>("allocates");
    const auto row = [](const char* tag, PaStreamCallback* callback, bool allocates) {
        QTest::newRow(tag) << reinterpret_cast<void*>(callback) << allocates;
    };
    row("operator new and delete", allocatingCallback, true);
    row("a vector", growingCallback, true);
    row("a mutex", lockingCallback, false);
    row("a shared mutex", sharedLockingCallback, false);
}

void TestRealtimeCallback::badCallback_isCaught()
{
    QFETCH(void*, callback);
    QFETCH(const bool, allocates);
    const std::vector<float> block(2 * kBlock, 0.5F);
    resetCounts();
    callGuarded(reinterpret_cast<PaStreamCallback*>(callback), block, 0, nullptr);
    const int allocated = allocations;
    const int locked = locks;
    QCOMPARE(allocated, allocates ? 2 : 0); // taken and given back
    QCOMPARE(locked, allocates ? 0 : 1);
}

void TestRealtimeCallback::captureCallback_neitherAllocatesNorLocks_data()
{
    QTest::addColumn<int>("calls");
    QTest::addColumn<bool>("isOpen");
    QTest::addColumn<bool>("isResuming");
    QTest::addColumn<bool>("hasOverflowed");
    QTest::addColumn<float>("level");
    QTest::newRow("signal") << 5 << true << false << false << 0.5F;
    QTest::newRow("digital silence") << 5 << true << false << false << 0.0F;
    QTest::newRow("ring runs full") << 50 << true << false << false << 0.5F;
    QTest::newRow("device overflow") << 5 << true << false << true << 0.5F;
    QTest::newRow("first after an outage") << 1 << true << true << false << 0.5F;
    QTest::newRow("given up") << 5 << false << false << false << 0.5F;
}

void TestRealtimeCallback::captureCallback_neitherAllocatesNorLocks()
{
    QFETCH(const int, calls);
    QFETCH(const bool, isOpen);
    QFETCH(const bool, isResuming);
    QFETCH(const bool, hasOverflowed);
    QFETCH(const float, level);
    SampleRing ring(2, 10 * kBlock);
    CaptureTap tap;
    tap.open(ring,
             kFormat,
             isResuming ? std::optional(CaptureTap::Clock::now() - std::chrono::seconds(3))
                        : std::nullopt);
    if (!isOpen) {
        tap.shut();
    }
    const std::vector<float> block(2 * kBlock, level);
    resetCounts();
    for (int i = 0; i < calls; ++i) {
        callGuarded(audio::captureCallback, block, hasOverflowed ? paInputOverflow : 0, &tap);
    }
    const int allocated = allocations;
    const int locked = locks;
    QCOMPARE(callbacksRun, calls);
    QCOMPARE(allocated, 0);
    QCOMPARE(locked, 0);
    QCOMPARE(ring.framesLost() > 0, isOpen && (calls > 10 || hasOverflowed || isResuming));
}

void TestRealtimeCallback::captureThroughPortAudio_neitherAllocatesNorLocks()
{
    if (const QString missing = VirtualCard::missingProgram(); !missing.isEmpty()) {
        QSKIP(qPrintable(QStringLiteral("no virtual card without ") + missing));
    }
    VirtualCard card;
    card.useInThisProcess();
    QVERIFY2(card.start(), qPrintable(card.whatFailed()));
    const auto source = audio::makeCardSource({{}, "pulse", kRateHz, 2});
    QVERIFY(source->open().has_value());
    SampleRing ring(2, 100'000);
    resetCounts();
    QVERIFY(source->start(ring).has_value());
    // More than the ring takes, so that the full ring is met as well.
    QTRY_VERIFY_WITH_TIMEOUT(ring.framesLost() > 0, 20'000);
    source->stop();
    const int called = callbacksRun;
    const int allocated = allocations;
    const int locked = locks;
    QCOMPARE_GE(called, 10);
    QCOMPARE(allocated, 0);
    QCOMPARE(locked, 0);
    using namespace Qt::StringLiterals;
    qInfo().noquote() << tests::figureLine(
        u"allocations + locks in %1 callbacks by PortAudio"_s.arg(called),
        u"%1 + %2"_s.arg(allocated).arg(locked),
        u"0 + 0"_s,
        allocated + locked == 0);
}

QTEST_GUILESS_MAIN(TestRealtimeCallback)
#include "tst_realtime_callback.moc"

// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/capture.h"

#include <QTest>

#include <cmath>
#include <numbers>

#include "tests/app/scripted_source.h"

using namespace sinewright;
using namespace sinewright::app;
using namespace sinewright::tests;

namespace {

/// Loses samples each time it is tended, from the third time on, as often as it is told.
class LosingSource final : public audio::Source
{
public:
    LosingSource(std::shared_ptr<Script> script, int losses)
        : m_script(script)
        , m_source(script)
        , m_losses(losses)
    {}
    core::Result<audio::StreamFormat> open() override { return m_source.open(); }
    core::Result<void> start(audio::SampleRing& ring) override { return m_source.start(ring); }
    void stop() override { m_source.stop(); }
    void tend() override
    {
        if (++m_tended > 2 && m_losses > 0) {
            --m_losses;
            m_script->framesToLose = 100;
        }
        m_source.tend();
    }
    audio::SourceStatus status() const override { return m_source.status(); }

private:
    std::shared_ptr<Script> m_script;
    ScriptedSource m_source;
    int m_losses;
    int m_tended = 0;
};

/// Whether a stretch of the scripted tone, level 0.5, is in one piece: no sample is further from what the two before
/// it foretell than its small second harmonic and the rounding to float can be.
bool isInOnePiece(const std::vector<double>& samples, const Script& script)
{
    const double turn = 2.0 * std::cos(2.0 * std::numbers::pi * script.frequencyHz / script.rateHz);
    for (std::size_t i = 2; i < samples.size(); ++i) {
        if (std::abs(samples[i] - turn * samples[i - 1] + samples[i - 2]) > 1e-4) {
            return false;
        }
    }
    return true;
}

} // namespace

class TestCapture : public QObject
{
    Q_OBJECT

private slots:
    void stretch_isOfTheLengthAndChannelAskedFor()
    {
        const auto script = std::make_shared<Script>();
        ScriptedSource source(script);
        const auto format = source.open();
        const auto samples = captureStretch(source, *format, 1, 1.25);
        QVERIFY(samples);
        QCOMPARE(samples->size(), std::size_t{60000});
        QVERIFY(isInOnePiece(*samples, *script));
        QCOMPARE_LE(std::abs(*std::max_element(samples->begin(), samples->end()) - 0.5), 1e-3);
        QCOMPARE(script->stopped.load(), 1);
        const auto other = captureStretch(source, *format, 2, 0.5);
        QVERIFY(other);
        QCOMPARE_LE(std::abs(*std::max_element(other->begin(), other->end()) - 0.25), 1e-3);
    }

    void lossOnTheWay_startsAgain()
    {
        const auto script = std::make_shared<Script>();
        LosingSource source(script, 1);
        const auto format = source.open();
        const auto samples = captureStretch(source, *format, 1, 1.0);
        QVERIFY(samples);
        QCOMPARE(samples->size(), std::size_t{48000});
        QVERIFY(isInOnePiece(*samples, *script));
    }

    void lossesWithoutEnd_areGivenUp()
    {
        LosingSource source(std::make_shared<Script>(), 1000);
        const auto format = source.open();
        const auto samples = captureStretch(source, *format, 1, 1.0);
        QVERIFY(!samples);
        QVERIFY(samples.error().isInterrupted);
        QVERIFY(!samples.error().detail.empty());
    }

    void sourceThatGivesNothing_isGivenUp()
    {
        const auto script = std::make_shared<Script>();
        script->condition = audio::SourceCondition::Lost;
        ScriptedSource source(script);
        const auto format = source.open();
        const auto samples = captureStretch(source, *format, 1, 1.0);
        QVERIFY(!samples);
        QVERIFY(!samples.error().isInterrupted);
        QVERIFY(QByteArray::fromStdString(samples.error().detail).contains("gone"));
    }
};

QTEST_APPLESS_MAIN(TestCapture)
#include "tst_capture.moc"

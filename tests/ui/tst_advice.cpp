// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/advice.h"

#include <QTest>

#include "tests/support/fake_frames.h"

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

using Condition = BenchState::Condition;

BenchState running()
{
    BenchState state;
    state.condition = Condition::Running;
    return state;
}

} // namespace

class TestAdvice final : public QObject
{
    Q_OBJECT
private slots:
    void init() { QTest::failOnWarning(QRegularExpression(u".*"_s)); }

    void trouble_isSaidAtOnceAndNamesTheRemedy()
    {
        AdviceLine line;
        tests::FakeBench bench;
        const auto frame = bench.trimFor(20.0);
        line.update(running(), frame.get(), false, 0);
        core::Frame over = *frame;
        over.quick.status = core::ReadingStatus::Overload;
        QVERIFY(line.update(running(), &over, false, 10));
        QVERIFY(line.text().contains(u"gain down"_s));
        QVERIFY(line.isAlert());
        BenchState lost = running();
        lost.condition = Condition::Lost;
        lost.message = u"The interface went away: plug it in again."_s;
        QVERIFY(line.update(lost, frame.get(), false, 20));
        QCOMPARE(line.text(), lost.message);
        QVERIFY(line.isAlert());
    }

    void aPassingState_isNotSaid()
    {
        AdviceLine line;
        tests::FakeBench bench;
        const auto good = bench.trimFor(20.0);
        const auto none = bench.nextWithoutTone();
        line.update(running(), good.get(), false, 0);
        const QString before = line.text();
        QVERIFY(!line.update(running(), none.get(), false, 100));
        QVERIFY(!line.update(running(), good.get(), false, 300));
        QCOMPARE(line.text(), before);
        QVERIFY(!line.update(running(), none.get(), false, 400));
        QVERIFY(line.update(running(), none.get(), false, 1200));
        QVERIFY(line.text().startsWith(u"No tone yet"_s));
    }

    void steadyTone_doesNotChatter()
    {
        AdviceLine line;
        tests::FakeBench bench;
        static_cast<void>(bench.trimFor(60.0));
        int changes = 0;
        for (int i = 0; i < 400; ++i) { // twenty seconds of frames with scattering figures
            changes += line.update(running(), bench.next(2.50).get(), false, i * 50) ? 1 : 0;
        }
        // The level has just moved, then it is steady, and the best grows older by one step of words.
        QCOMPARE_LE(changes, 4);
        QVERIFY(line.text().startsWith(u"Steady at 1.19"_s));
    }

    void movingLevel_asksForPatience()
    {
        AdviceLine line;
        tests::FakeBench bench;
        std::shared_ptr<const core::Frame> frame;
        for (int i = 0; i < 40; ++i) {
            frame = bench.next(2.0 + 0.01 * i);
            line.update(running(), frame.get(), false, i * 50);
        }
        QVERIFY(line.text().contains(u"settle"_s));
    }

    void everyCondition_hasASentence_data()
    {
        QTest::addColumn<int>("condition");
        QTest::newRow("starting") << static_cast<int>(Condition::Starting);
        QTest::newRow("running, no frame") << static_cast<int>(Condition::Running);
        QTest::newRow("silent") << static_cast<int>(Condition::Silent);
        QTest::newRow("lost") << static_cast<int>(Condition::Lost);
        QTest::newRow("ended") << static_cast<int>(Condition::Ended);
        QTest::newRow("failed") << static_cast<int>(Condition::Failed);
    }
    void everyCondition_hasASentence()
    {
        QFETCH(const int, condition);
        AdviceLine line;
        BenchState state;
        state.condition = static_cast<Condition>(condition);
        line.update(state, nullptr, false, 0);
        QCOMPARE_GT(line.text().size(), 20);
        QVERIFY(line.text().endsWith(u'.'));
    }

    void ages_areWords()
    {
        QCOMPARE(ageText(3.0), u"a moment ago"_s);
        QCOMPARE(ageText(30.0), u"half a minute ago"_s);
        QCOMPARE(ageText(60.0), u"a minute ago"_s);
        QCOMPARE(ageText(130.0), u"2 minutes ago"_s);
        QCOMPARE(ageText(9000.0), u"more than an hour ago"_s);
    }
};

} // namespace sinewright::ui

QTEST_GUILESS_MAIN(sinewright::ui::TestAdvice)
#include "tst_advice.moc"

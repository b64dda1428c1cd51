// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/figures_model.h"

#include <QAbstractItemModelTester>
#include <QSignalSpy>
#include <QTest>

#include "tests/support/fake_frames.h"

namespace sinewright::ui {

using namespace Qt::StringLiterals;

class TestFiguresModel final : public QObject
{
    Q_OBJECT
private slots:
    void init() { QTest::failOnWarning(QRegularExpression(u".*"_s)); }

    void table_isAValidModelThroughItsLife()
    {
        FiguresModel model;
        const QAbstractItemModelTester tester(
            &model, QAbstractItemModelTester::FailureReportingMode::QtTest);
        tests::FakeBench bench;
        model.setFrame(bench.next(2.4).get());
        model.setFrame(bench.next(2.5).get());
        model.setFrame(bench.nextWithoutTone().get());
        model.setFrame(nullptr);
        QCOMPARE(model.rowCount(), 0);
    }

    void newFigures_changeCellsWithoutAReset()
    {
        FiguresModel model;
        tests::FakeBench bench;
        model.setFrame(bench.next(2.0).get());
        const QSignalSpy resets(&model, &QAbstractItemModel::modelReset);
        const QSignalSpy changes(&model, &QAbstractItemModel::dataChanged);
        model.setFrame(bench.next(2.6).get());
        QCOMPARE(resets.count(), 0); // a reset would throw a screen reader back to the top
        QCOMPARE_GT(changes.count(), 0);
    }

    void everyHarmonicAndTheBest_haveARow()
    {
        tests::FakeBench bench;
        const auto frame = bench.trimFor(30.0);
        QStringList names;
        for (const FigureRow& row : figureRows(frame.get())) {
            names << row.name;
            QVERIFY(!row.figure.value.contains(u"nan"_s, Qt::CaseInsensitive));
        }
        for (int order = 2; order <= 10; ++order) {
            QVERIFY(names.contains(u"harmonic %1"_s.arg(order)));
        }
        QVERIFY(names.contains(u"best THD so far"_s));
    }
};

} // namespace sinewright::ui

QTEST_GUILESS_MAIN(sinewright::ui::TestFiguresModel)
#include "tst_figures_model.moc"

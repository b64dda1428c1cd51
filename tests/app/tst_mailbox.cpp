// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/mailbox.h"

#include <QTest>

#include <memory>
#include <thread>

using sinewright::app::Mailbox;

class TestMailbox : public QObject
{
    Q_OBJECT

private slots:
    void empty_givesNothing()
    {
        Mailbox<int> box;
        QVERIFY(!box.take());
    }

    void newest_isGivenOnce()
    {
        Mailbox<int> box;
        box.put(1);
        box.put(2);
        box.put(3);
        QCOMPARE(box.take().value_or(0), 3);
        QVERIFY(!box.take());
        box.put(4);
        QCOMPARE(box.take().value_or(0), 4);
    }

    void value_isNotKeptAliveOnceTaken()
    {
        Mailbox<std::shared_ptr<int>> box;
        auto value = std::make_shared<int>(7);
        const std::weak_ptr<int> watch = value;
        box.put(std::move(value));
        {
            const auto taken = box.take();
            QVERIFY(taken && **taken == 7);
        }
        QVERIFY(watch.expired());
    }

    /// Two threads as they run in the program: what arrives is whole, in order, and the last one arrives.
    void twoThreads_seeWholeValuesInOrder()
    {
        struct Pair
        {
            int first = 0;
            int second = 0;
        };
        constexpr int kLast = 200000;
        Mailbox<std::shared_ptr<const Pair>> box;
        std::jthread writer([&box] {
            for (int i = 1; i <= kLast; ++i) {
                box.put(std::make_shared<const Pair>(Pair{i, -i}));
            }
        });
        int seen = 0;
        while (seen < kLast) {
            if (const auto pair = box.take()) {
                QCOMPARE((*pair)->first, -(*pair)->second);
                QCOMPARE_GT((*pair)->first, seen);
                seen = (*pair)->first;
            }
        }
    }
};

QTEST_APPLESS_MAIN(TestMailbox)
#include "tst_mailbox.moc"

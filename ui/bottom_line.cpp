// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/bottom_line.h"

#include "ui/figure_text.h"
#include "ui/theme.h"

#include <QHBoxLayout>
#include <QLocale>

#include <algorithm>
#include <chrono>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr std::chrono::seconds kNoticeStays{10};

QString conditionText(BenchState::Condition condition)
{
    switch (condition) {
    case BenchState::Condition::Starting:
        return BottomLine::tr("starting");
    case BenchState::Condition::Running:
        return {};
    case BenchState::Condition::Silent:
        return BottomLine::tr("silent");
    case BenchState::Condition::Lost:
        return BottomLine::tr("lost, trying to get it back");
    case BenchState::Condition::Ended:
        return BottomLine::tr("ended");
    case BenchState::Condition::Failed:
        return BottomLine::tr("not open");
    }
    return {};
}

} // namespace

BottomLine::BottomLine(QWidget* parent)
    : QWidget(parent)
    , m_state(new QLabel(this))
    , m_lost(new QLabel(this))
    , m_notice(new QLabel(this))
{
    setObjectName(u"bottomLine"_s);
    setAccessibleName(tr("State of the bench"));
    auto* row = new QHBoxLayout(this);
    row->setContentsMargins(0, 3, 0, 5);
    row->setSpacing(0);
    for (QLabel* label : {m_state, m_lost, m_notice}) {
        label->setFont(figureFont(13));
        label->setTextFormat(Qt::PlainText);
        row->addWidget(label);
    }
    m_state->setProperty("role", u"soft"_s);
    m_lost->setProperty("role", u"soft"_s);
    m_notice->setSizePolicy(QSizePolicy::Ignored, QSizePolicy::Preferred);
    m_notice->setAlignment(Qt::AlignRight | Qt::AlignVCenter);
    row->setStretch(2, 1);
    m_noticeEnds.setSingleShot(true);
    m_noticeEnds.setInterval(kNoticeStays);
    connect(&m_noticeEnds, &QTimer::timeout, m_notice, &QLabel::clear);
    compose();
}

void BottomLine::setBenchState(const BenchState& state)
{
    m_bench = state;
    compose();
}

void BottomLine::setFramesLost(quint64 lost)
{
    if (lost > m_bench.framesLost) {
        m_bench.framesLost = lost;
        compose();
    }
}

void BottomLine::compose()
{
    QStringList parts{m_bench.source.label, conditionText(m_bench.condition)};
    if (m_bench.rateHz > 0.0) {
        parts << rateText(m_bench.rateHz)
              << tr("channel %1 of %2").arg(m_bench.channel).arg(std::max(1, m_bench.channels));
    }
    parts << (m_bench.sessionFile.isEmpty() ? tr("no session is being stored")
                                            : m_bench.sessionFile);
    parts.removeAll(QString());
    const QString separator = u"   ·   "_s;
    m_state->setText(parts.join(separator) + separator);
    const quint64 lost = m_bench.framesLost;
    m_lost->setText(lost == 0 ? tr("no samples lost") : tr("samples lost: %1").arg(lost));
    m_lost->setProperty("role", lost == 0 ? u"soft"_s : u"alert"_s);
    m_lost->setStyleSheet(QString()); // has the style sheet look at the property again
}

void BottomLine::showNotice(const QString& sentence)
{
    m_notice->setText(sentence);
    m_notice->setToolTip(sentence);
    m_noticeEnds.start();
}

} // namespace sinewright::ui

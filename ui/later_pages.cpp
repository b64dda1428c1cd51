// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/later_pages.h"

#include "ui/figure_text.h"
#include "ui/prose.h"
#include "ui/reading_choice.h"

#include <QButtonGroup>
#include <QGridLayout>
#include <QLabel>
#include <QPushButton>
#include <QRadioButton>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr qint64 kShowEveryMs = 240;

void setTextIfNew(QLabel& label, const QString& text)
{
    if (label.text() != text) {
        label.setText(text);
    }
}

} // namespace

WarmUpPage::WarmUpPage(QWidget* parent)
    : BenchPage(parent)
    , m_frequency(new QLabel(QString(kAbsent), this))
    , m_deviation(new QLabel(this))
    , m_level(new QLabel(QString(kAbsent), this))
    , m_thd(new QLabel(QString(kAbsent), this))
{
    setAccessibleName(tr("Warm-up"));
    QVBoxLayout* column = scrollingSheet(this);
    column->addWidget(titleLabel(tr("How it settles and how well it stays"), this));
    column->addWidget(paragraphLabel(
        tr("This page will log frequency, level and distortion for minutes to days, say when the "
           "oscillator is ready, and how stable it is. The log is not built yet; the running "
           "figures below are live."),
        this));
    column->addSpacing(12);
    auto* grid = new QGridLayout;
    grid->setVerticalSpacing(0);
    grid->setHorizontalSpacing(40);
    int row = 0;
    const auto add = [&](const QString& name, QLabel* figure) {
        figure->setFont(displayFont(52));
        figure->setAccessibleName(name);
        grid->addWidget(fieldLabel(name, this), row++, 0);
        grid->addWidget(figure, row++, 0);
        grid->setRowMinimumHeight(row++, 14);
    };
    add(tr("Frequency"), m_frequency);
    m_deviation->setFont(figureFont(14));
    m_deviation->setProperty("role", u"soft"_s);
    grid->addWidget(m_deviation, row - 1, 0);
    grid->setRowMinimumHeight(row++, 14);
    add(tr("Level"), m_level);
    add(tr("THD"), m_thd);
    grid->setColumnStretch(1, 1);
    column->addLayout(grid);
    column->addStretch(1);
}

void WarmUpPage::showFrame(const std::shared_ptr<const core::Frame>& frame)
{
    if (m_sinceShown.isValid() && !m_sinceShown.hasExpired(kShowEveryMs)) {
        return;
    }
    m_sinceShown.start();
    const ShownReading shown = frame ? shownReading(*frame) : ShownReading{};
    const core::Reading reading = shown.reading ? *shown.reading : core::Reading();
    setTextIfNew(*m_frequency,
                 joined(frequencyFigure(reading.frequencyHz, reading.frequencyStdHz)));
    setTextIfNew(*m_deviation,
                 reading.frequencyStdHz
                     ? tr("one standard deviation: %1")
                           .arg(joined(frequencySpreadFigure(reading.frequencyStdHz)))
                     : QString());
    setTextIfNew(*m_level,
                 joined(reading.levelVrms ? voltFigure(reading.levelVrms)
                                          : decibelFigure(reading.levelDbfs, 2, u"dBFS"_s)));
    setTextIfNew(
        *m_thd, joined(percentFigure(reading.thdRatio, shown.isFull ? kFullDigits : kQuickDigits)));
}

NetworkPage::NetworkPage(QWidget* parent) : BenchPage(parent)
{
    setAccessibleName(tr("Network"));
    QVBoxLayout* column = scrollingSheet(this);
    column->addWidget(titleLabel(tr("Does the network do what its parts promise"), this));
    column->addWidget(paragraphLabel(
        tr("This page will play a sweep through the RC network and compare its transfer function "
           "with the one that the part values give: where its centre lies, how deep the notch is "
           "or how high the peak, and which part is off."),
        this));
    column->addWidget(paragraphLabel(
        tr("It will also take you along the dial, range by range, and show how purity and level "
           "hold over the tuning range."),
        this));
    column->addWidget(paragraphLabel(
        tr("None of this is built yet. Until then, turn the dial by hand and watch frequency, "
           "level and THD on the Trim page."),
        this));
    column->addStretch(1);
}

RecordPage::RecordPage(QWidget* parent) : BenchPage(parent), m_scale(new QButtonGroup(this))
{
    setAccessibleName(tr("Record"));
    QVBoxLayout* column = scrollingSheet(this);
    column->addWidget(titleLabel(tr("A record that others can trust"), this));
    column->addWidget(paragraphLabel(
        tr("This page will gather what was measured into a test record: figures with their "
           "uncertainties, settings, plots, and the takes to measure again. The record is not "
           "built yet; pictures can be saved now."),
        this));
    column->addWidget(hairRule(this));
    column->addWidget(headingLabel(tr("Pictures"), this));
    column->addWidget(paragraphLabel(
        tr("A picture carries a caption with time, source, rate, settings and figures. On any page "
           "one key saves the page, another the plot under the pointer: F1 lists them."),
        this));
    auto* row = new QHBoxLayout;
    row->setSpacing(20);
    auto* save = new QPushButton(tr("Save a picture of the Trim page"), this);
    save->setObjectName(u"saveTrimPicture"_s);
    save->setToolTip(tr("Saves the Trim page as it stands now, as a PNG."));
    connect(save, &QPushButton::clicked, this, &RecordPage::pictureOfTrimWanted);
    row->addWidget(save);
    const std::pair<int, QString> sizes[] = {{1, tr("as on the screen")},
                                             {2, tr("twice as fine, for print")}};
    for (const auto& [scale, text] : sizes) {
        auto* choice = new QRadioButton(text, this);
        choice->setToolTip(tr("Pixels of the picture over pixels of the window: %1").arg(scale));
        m_scale->addButton(choice, scale);
        row->addWidget(choice);
    }
    connect(m_scale, &QButtonGroup::idClicked, this, &RecordPage::pictureScaleChosen);
    row->addStretch(1);
    column->addLayout(row);
    column->addStretch(1);
    setPictureScale(1);
}

void RecordPage::setPictureScale(int scale)
{
    m_scale->button(scale == 2 ? 2 : 1)->setChecked(true);
}

} // namespace sinewright::ui

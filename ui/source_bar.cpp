// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/source_bar.h"

#include "ui/figure_text.h"

#include <QFileDialog>
#include <QFileInfo>
#include <QHBoxLayout>
#include <QLabel>
#include <QSignalBlocker>

#include <algorithm>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr double kRates[] = {44100.0, 48000.0, 88200.0, 96000.0, 176400.0, 192000.0};

bool isSame(const SourceChoice& a, const SourceChoice& b)
{
    return a.kind == b.kind && a.id == b.id;
}

} // namespace

SourceBar::SourceBar(QWidget* parent)
    : QWidget(parent)
    , m_picker(new ChoiceBox(this))
    , m_rate(new ChoiceBox(this))
    , m_channel(new ChoiceBox(this))
    , m_meter(new LevelMeter(this))
{
    m_picker->setObjectName(u"sourcePicker"_s);
    m_picker->setAccessibleName(tr("Source"));
    m_picker->setToolTip(tr("Where the signal comes from: the demo oscillator, an audio interface, "
                            "or a take on disk."));
    m_picker->setMinimumWidth(170);
    m_picker->setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
    m_picker->setMaximumWidth(280);
    m_rate->setObjectName(u"ratePicker"_s);
    m_rate->setAccessibleName(tr("Sample rate"));
    m_rate->setToolTip(tr("Sample rate in kHz that the interface is asked for."));
    m_channel->setObjectName(u"channelPicker"_s);
    m_channel->setAccessibleName(tr("Channel"));
    m_channel->setToolTip(tr("Which channel of the source is measured."));
    auto* row = new QHBoxLayout(this);
    row->setContentsMargins(0, 0, 0, 0);
    row->setSpacing(18);
    row->addWidget(labelled(tr("Source"), m_picker));
    row->addWidget(labelled(tr("Rate"), m_rate));
    row->addWidget(labelled(tr("Channel"), m_channel));
    row->addStretch(1);
    m_meter->setMaximumWidth(520);
    row->addWidget(m_meter, 3);
    connect(m_picker, &ChoiceBox::aboutToOpen, this, &SourceBar::sourcesWanted);
    connect(m_picker, &QComboBox::activated, this, &SourceBar::pick);
    connect(m_rate, &QComboBox::activated, this, [this] { chooseAgain(); });
    connect(m_channel, &QComboBox::activated, this, [this] { chooseAgain(); });
    fillPicker();
}

QWidget* SourceBar::labelled(const QString& label, QWidget* field)
{
    auto* box = new QWidget(this);
    auto* column = new QVBoxLayout(box);
    column->setContentsMargins(0, 0, 0, 0);
    column->setSpacing(0);
    auto* name = new QLabel(label, box);
    name->setProperty("role", u"label"_s);
    name->setFont(labelFont(11));
    name->setBuddy(field);
    column->addWidget(name);
    column->addWidget(field);
    return box;
}

void SourceBar::setTheme(const Theme& theme)
{
    m_meter->setTheme(theme);
}

void SourceBar::setSources(const QList<SourceChoice>& choices)
{
    m_choices = choices;
    fillPicker();
}

void SourceBar::setBenchState(const BenchState& state)
{
    m_state = state;
    fillPicker();
    fillRates();
    fillChannels();
}

void SourceBar::fillPicker()
{
    const QSignalBlocker quiet(m_picker);
    m_picker->clear();
    int current = -1;
    for (const SourceChoice& choice : std::as_const(m_choices)) {
        if (isSame(choice, m_state.source)) {
            current = m_picker->count();
        }
        m_picker->addItem(choice.label, QVariant::fromValue(m_picker->count()));
    }
    if (current < 0 && !m_state.source.id.isEmpty()) {
        m_choices.append(m_state.source); // a take, or a card that has gone
        current = m_picker->count();
        m_picker->addItem(m_state.source.label, QVariant::fromValue(current));
    }
    m_picker->insertSeparator(m_picker->count());
    m_picker->addItem(tr("Open take…"), -1);
    m_picker->setCurrentIndex(current);
}

void SourceBar::fillRates()
{
    const QSignalBlocker quiet(m_rate);
    m_rate->clear();
    if (m_state.source.kind == SourceKind::Take) {
        m_rate->addItem(m_state.rateHz > 0.0 ? rateText(m_state.rateHz) : QString(kAbsent),
                        m_state.rateHz);
    } else {
        for (const double rate : kRates) {
            m_rate->addItem(rateText(rate), rate);
        }
        if (m_state.rateHz > 0.0 && m_rate->findData(m_state.rateHz) < 0) {
            m_rate->addItem(rateText(m_state.rateHz), m_state.rateHz);
        }
    }
    m_rate->setCurrentIndex(m_rate->findData(m_state.rateHz));
    m_rate->setEnabled(m_state.source.kind != SourceKind::Take);
}

void SourceBar::fillChannels()
{
    const QSignalBlocker quiet(m_channel);
    m_channel->clear();
    for (int channel = 1; channel <= std::max(1, m_state.channels); ++channel) {
        m_channel->addItem(tr("%1 of %2").arg(channel).arg(std::max(1, m_state.channels)), channel);
    }
    m_channel->setCurrentIndex(m_state.channel - 1);
    m_channel->setEnabled(m_state.channels > 1);
}

void SourceBar::pick(int index)
{
    const int number = m_picker->itemData(index).toInt();
    if (number < 0) {
        fillPicker(); // stays on what is open until the file is
        openTake();
        return;
    }
    if (number < m_choices.size()) {
        emit sourceChosen(m_choices.at(number));
    }
}

void SourceBar::chooseAgain()
{
    SourceChoice choice = m_state.source;
    choice.rateHz = choice.kind == SourceKind::Take ? 0.0 : m_rate->currentData().toDouble();
    choice.channel = m_channel->currentData().toInt();
    emit sourceChosen(choice);
}

void SourceBar::openTake()
{
    const QString path =
        QFileDialog::getOpenFileName(this,
                                     tr("Open take"),
                                     QString(),
                                     tr("Takes (*.wav *.flac *.aif *.aiff *.caf);;All files (*)"));
    if (path.isEmpty()) {
        return;
    }
    SourceChoice choice;
    choice.kind = SourceKind::Take;
    choice.id = path;
    choice.label = QFileInfo(path).fileName();
    emit sourceChosen(choice);
}

} // namespace sinewright::ui

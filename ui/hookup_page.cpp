// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/hookup_page.h"

#include "core/units.h"
#include "ui/choice_box.h"
#include "ui/prose.h"
#include "ui/reading_choice.h"

#include <QDoubleSpinBox>
#include <QGridLayout>
#include <QLabel>
#include <QSignalBlocker>
#include <QSpinBox>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr double kHighestVolt = 1000.0;
constexpr double kHighestBandHz = 96000.0;
constexpr double kLowestBandSpanHz = 1.0;
constexpr double kTooHotDbfs = -3.0;    ///< less headroom than a settling oscillator wants
constexpr double kTooFaintDbfs = -30.0; ///< the interface's own noise begins to count

} // namespace

HookUpPage::HookUpPage(QWidget* parent)
    : BenchPage(parent)
    , m_level(paragraphLabel(QString(), this))
    , m_fullScale(new QDoubleSpinBox(this))
    , m_bandLow(new QDoubleSpinBox(this))
    , m_bandHigh(new QDoubleSpinBox(this))
    , m_harmonics(new QSpinBox(this))
    , m_weighting(new ChoiceBox(this))
{
    setAccessibleName(tr("Hook-up"));
    QVBoxLayout* column = scrollingSheet(this);
    addCautions(*column);
    column->addWidget(hairRule(this));
    addLevel(*column);
    column->addWidget(hairRule(this));
    addSettings(*column);
    column->addStretch(1);
    setMeasureSettings({});
}

void HookUpPage::addCautions(QVBoxLayout& column)
{
    column.addWidget(headingLabel(tr("Before anything is joined to the interface"), this));
    const QString cautions[] = {
        tr("Valve oscillators and anything fed from the mains carry voltages that kill, and "
           "capacitors keep them long after "
           "the switch is off. If you are not used to such work, leave it to somebody who is."),
        tr("Join the input only to a circuit that is isolated from the mains. If you cannot tell "
           "whether it is, it is not."),
        tr("Measure the output with a meter first, for high voltage and for DC. Then go in through "
           "a coupling capacitor and "
           "an attenuator."),
        tr("Two grounds make a loop: hum that was not there before is a reason to look for it, not "
           "to lift a safety earth."),
        tr("Lamps and regulators get hot. Turn headphones down before a tone or a sweep is "
           "played."),
        tr("What your country's rules or a licensed electrician say goes before anything written "
           "here."),
    };
    auto* grid = new QGridLayout;
    grid->setHorizontalSpacing(10);
    grid->setVerticalSpacing(7);
    grid->setColumnStretch(1, 1);
    int row = 0;
    for (const QString& caution : cautions) {
        QLabel* dash = paragraphLabel(u"–"_s, this);
        grid->addWidget(dash, row, 0, Qt::AlignTop);
        grid->addWidget(paragraphLabel(caution, this), row, 1);
        ++row;
    }
    column.addLayout(grid);
}

void HookUpPage::addLevel(QVBoxLayout& column)
{
    column.addWidget(headingLabel(tr("Source and level"), this));
    column.addWidget(paragraphLabel(
        tr("Choose the source above. Set the interface's gain so that the peaks stay 3 to 12 dB "
           "below full scale: a little room for the level to bounce when you turn the trimmer, "
           "and still well clear of the interface's own noise."),
        this));
    QFont font = m_level->font();
    font.setItalic(true);
    m_level->setFont(font);
    column.addWidget(m_level);
}

void HookUpPage::addSettings(QVBoxLayout& column)
{
    column.addWidget(headingLabel(tr("What is measured"), this));
    auto* grid = new QGridLayout;
    grid->setHorizontalSpacing(28);
    grid->setVerticalSpacing(2);
    int place = 0;
    const auto add =
        [&](const QString& label, const QString& tip, const QString& name, QWidget* field) {
            QLabel* above = fieldLabel(label, this);
            above->setBuddy(field);
            field->setAccessibleName(label);
            field->setToolTip(tip);
            field->setObjectName(name);
            field->setMinimumWidth(130);
            grid->addWidget(above, 0, place);
            grid->addWidget(field, 1, place++);
        };
    const auto number =
        [](QDoubleSpinBox& box, double low, double high, int decimals, const QString& unit) {
            box.setRange(low, high);
            box.setDecimals(decimals);
            box.setSuffix(u'\u00A0' + unit);
            box.setKeyboardTracking(false);
            box.setButtonSymbols(QAbstractSpinBox::NoButtons);
        };
    number(*m_fullScale, 0.0, kHighestVolt, 4, u"V rms"_s);
    m_fullScale->setSpecialValueText(tr("not calibrated"));
    number(*m_bandLow, 0.0, kHighestBandHz, 0, u"Hz"_s);
    number(*m_bandHigh, kLowestBandSpanHz, kHighestBandHz, 0, u"Hz"_s);
    m_harmonics->setRange(2, 32);
    m_harmonics->setKeyboardTracking(false);
    m_harmonics->setButtonSymbols(QAbstractSpinBox::NoButtons);
    m_weighting->addItem(tr("none"), static_cast<int>(core::Weighting::None));
    m_weighting->addItem(u"A"_s, static_cast<int>(core::Weighting::A));
    m_weighting->addItem(tr("468, rms detector"), static_cast<int>(core::Weighting::Itu468));
    add(tr("Full scale"),
        tr("Volts rms of a sine that just reaches full scale; 0: not calibrated."),
        u"fullScale"_s,
        m_fullScale);
    add(tr("Band from"), tr("Lower edge of the measuring band in Hz."), u"bandLow"_s, m_bandLow);
    add(tr("Band to"),
        tr("Upper edge of the measuring band in Hz; half the sample rate at the most."),
        u"bandHigh"_s,
        m_bandHigh);
    add(tr("Harmonics up to"),
        tr("Highest order that counts for THD."),
        u"harmonicCount"_s,
        m_harmonics);
    add(tr("Weighting"), tr("Weighting of residual and total."), u"weighting"_s, m_weighting);
    grid->setColumnStretch(place, 1);
    column.addLayout(grid);
    column.addWidget(paragraphLabel(
        tr("To find the full scale: feed a sine of known volts, note the level in dBFS, and enter "
           "the volts divided by 10 to the power of dBFS/20. From then on levels are shown in "
           "volts. It holds for this gain setting only. Measuring what the interface itself adds "
           "will be done here too."),
        this));
    for (QDoubleSpinBox* box : {m_fullScale, m_bandLow, m_bandHigh}) {
        connect(box, &QDoubleSpinBox::valueChanged, this, &HookUpPage::choose);
    }
    connect(m_harmonics, &QSpinBox::valueChanged, this, &HookUpPage::choose);
    connect(m_weighting, &QComboBox::activated, this, &HookUpPage::choose);
}

void HookUpPage::showFrame(const std::shared_ptr<const core::Frame>& frame)
{
    QString text;
    if (!frame) {
        text = tr("Nothing comes in yet.");
    } else if (isOverloaded(*frame)) {
        text = tr("Now: overloaded. Turn the gain down.");
    } else if (const auto& level = shownReading(*frame).reading->levelDbfs) {
        text = *level > kTooHotDbfs ? tr("Now: close to full scale. Turn the gain down a little.")
               : *level < kTooFaintDbfs
                   ? tr("Now: faint. Turn the gain up, or use less attenuation.")
                   : tr("Now: a good level.");
    } else {
        text = tr("Now: no tone that could be measured.");
    }
    if (text != m_level->text()) {
        m_level->setText(text);
    }
}

void HookUpPage::setMeasureSettings(const core::MeasureSettings& settings)
{
    m_settings = settings;
    const QSignalBlocker quiet[] = {QSignalBlocker(m_fullScale),
                                    QSignalBlocker(m_bandLow),
                                    QSignalBlocker(m_bandHigh),
                                    QSignalBlocker(m_harmonics),
                                    QSignalBlocker(m_weighting)};
    m_fullScale->setValue(settings.fullScaleVrms.value_or(0.0));
    m_bandLow->setValue(settings.band.lowHz);
    m_bandHigh->setValue(settings.band.highHz);
    m_harmonics->setValue(settings.harmonicCount);
    m_weighting->setCurrentIndex(m_weighting->findData(static_cast<int>(settings.weighting)));
}

void HookUpPage::choose()
{
    core::MeasureSettings settings = m_settings;
    settings.fullScaleVrms =
        m_fullScale->value() > 0.0 ? std::optional(m_fullScale->value()) : std::nullopt;
    settings.band = {m_bandLow->value(), m_bandHigh->value()};
    settings.harmonicCount = m_harmonics->value();
    settings.weighting = static_cast<core::Weighting>(m_weighting->currentData().toInt());
    if (settings.band.highHz < settings.band.lowHz + kLowestBandSpanHz) {
        setMeasureSettings(m_settings); // a band that holds nothing is not taken
        return;
    }
    if (!(settings == m_settings)) {
        m_settings = settings;
        emit measureSettingsChosen(settings);
    }
}

} // namespace sinewright::ui

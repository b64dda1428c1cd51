// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/settings.h"

#include "app/limits.h"
#include "app/words.h"

#include <QLocale>
#include <QSettings>
#include <QStandardPaths>

#include <algorithm>
#include <chrono>
#include <cmath>
#include <limits>

namespace sinewright::app {

using namespace Qt::StringLiterals;

namespace {

constexpr std::chrono::milliseconds kWriteAfter{400};

// Keys. The order is that of the file.
constexpr const char* kVersionKey = "version";
constexpr const char* kThemeKey = "view/theme";
constexpr const char* kPageKey = "view/page";
constexpr const char* kPictureScaleKey = "view/pictureScale";
constexpr const char* kGeometryKey = "view/geometry";
constexpr const char* kSourceKey = "source/name";
constexpr const char* kRateKey = "source/rateHz";
constexpr const char* kChannelKey = "source/channel";
constexpr const char* kBandLowKey = "measure/bandLowHz";
constexpr const char* kBandHighKey = "measure/bandHighHz";
constexpr const char* kHarmonicsKey = "measure/harmonicCount";
constexpr const char* kWeightingKey = "measure/weighting";
constexpr const char* kFullScaleKey = "measure/fullScaleVrms";
constexpr const char* kPictureFolderKey = "pictures/folder";

QString key(const char* name)
{
    return QString::fromLatin1(name);
}

QString textOf(const QSettings& file, const char* name)
{
    return file.value(key(name)).toString();
}

/// The number within its range, or `fallback` when there is none.
double
numberOf(const QSettings& file, const char* name, double lowest, double highest, double fallback)
{
    bool isNumber = false;
    const double value = textOf(file, name).toDouble(&isNumber);
    return isNumber && std::isfinite(value) ? std::clamp(value, lowest, highest) : fallback;
}

int wholeNumberOf(const QSettings& file, const char* name, int lowest, int highest, int fallback)
{
    bool isNumber = false;
    const int value = textOf(file, name).toInt(&isNumber);
    return isNumber ? std::clamp(value, lowest, highest) : fallback;
}

template <typename T, std::size_t N>
T choiceOf(const QSettings& file, const char* name, const Words<T, N>& words, T fallback)
{
    return valueOf(words, textOf(file, name)).value_or(fallback);
}

/// As many digits as it takes to read the same number back.
QString digits(double value)
{
    return QString::number(value, 'g', QLocale::FloatingPointShortest);
}

core::MeasureSettings readMeasure(const QSettings& file)
{
    core::MeasureSettings measure;
    const core::Band band{
        .lowHz = numberOf(file, kBandLowKey, 0.0, kHighestBandHz, measure.band.lowHz),
        .highHz = numberOf(file, kBandHighKey, 0.0, kHighestBandHz, measure.band.highHz)};
    if (band.lowHz < band.highHz) {
        measure.band = band;
    }
    measure.harmonicCount = wholeNumberOf(
        file, kHarmonicsKey, kLowestHarmonicCount, kHighestHarmonicCount, measure.harmonicCount);
    measure.weighting = choiceOf(file, kWeightingKey, kWeightingWords, measure.weighting);
    const double fullScaleVrms = numberOf(file, kFullScaleKey, 0.0, kHighestFullScaleVrms, 0.0);
    if (fullScaleVrms > 0.0) {
        measure.fullScaleVrms = fullScaleVrms;
    }
    return measure;
}

SourceSpec readSource(const QSettings& file)
{
    SourceSpec source = sourceFromText(textOf(file, kSourceKey)).value_or(SourceSpec());
    source.rateHz = numberOf(file, kRateKey, 0.0, kHighestRateHz, 0.0);
    if (source.kind == ui::SourceKind::Demo && source.rateHz > 0.0) {
        source.rateHz = std::clamp(source.rateHz, kDemoLowestRateHz, kDemoHighestRateHz);
    }
    source.channel = wholeNumberOf(file, kChannelKey, 1, kHighestChannel, 1);
    return source;
}

Remembered read(const QSettings& file)
{
    Remembered values;
    if (wholeNumberOf(file, kVersionKey, 0, std::numeric_limits<int>::max(), 0) !=
        Settings::kVersion) {
        return values;
    }
    values.view.theme = choiceOf(file, kThemeKey, kThemeWords, values.view.theme);
    values.view.page = choiceOf(file, kPageKey, kPageWords, values.view.page);
    values.view.pictureScale =
        wholeNumberOf(file, kPictureScaleKey, 1, kLargestPictureScale, values.view.pictureScale);
    values.view.geometry = file.value(key(kGeometryKey)).toByteArray();
    values.source = readSource(file);
    values.measure = readMeasure(file);
    values.pictureFolder = textOf(file, kPictureFolderKey);
    return values;
}

void writeTo(QSettings& file, const Remembered& values)
{
    file.setValue(key(kVersionKey), Settings::kVersion);
    file.setValue(key(kThemeKey), QString::fromLatin1(wordOf(kThemeWords, values.view.theme)));
    file.setValue(key(kPageKey), QString::fromLatin1(wordOf(kPageWords, values.view.page)));
    file.setValue(key(kPictureScaleKey), values.view.pictureScale);
    file.setValue(key(kGeometryKey), values.view.geometry);
    file.setValue(key(kSourceKey), textFromSource(values.source));
    file.setValue(key(kRateKey), digits(values.source.rateHz));
    file.setValue(key(kChannelKey), values.source.channel);
    file.setValue(key(kBandLowKey), digits(values.measure.band.lowHz));
    file.setValue(key(kBandHighKey), digits(values.measure.band.highHz));
    file.setValue(key(kHarmonicsKey), values.measure.harmonicCount);
    file.setValue(key(kWeightingKey),
                  QString::fromLatin1(wordOf(kWeightingWords, values.measure.weighting)));
    file.setValue(key(kFullScaleKey), digits(values.measure.fullScaleVrms.value_or(0.0)));
    file.setValue(key(kPictureFolderKey), values.pictureFolder);
}

QString usualFile()
{
    return QStandardPaths::writableLocation(QStandardPaths::AppConfigLocation) +
           u"/sinewright.ini"_s;
}

} // namespace

Settings::Settings(const QString& file, QObject* parent)
    : QObject(parent)
    , m_file(file.isEmpty() ? usualFile() : file)
    , m_values(read(QSettings(m_file, QSettings::IniFormat)))
{
    m_writing.setSingleShot(true);
    m_writing.setInterval(kWriteAfter);
    connect(&m_writing, &QTimer::timeout, this, &Settings::write);
}

Settings::~Settings()
{
    if (m_writing.isActive()) {
        write();
    }
}

void Settings::setView(const ui::ViewSettings& view)
{
    m_values.view = view;
    writeSoon();
}

void Settings::setSource(const SourceSpec& source)
{
    m_values.source = source;
    writeSoon();
}

void Settings::setMeasure(const core::MeasureSettings& measure)
{
    m_values.measure = measure;
    writeSoon();
}

void Settings::setPictureFolder(const QString& folder)
{
    m_values.pictureFolder = folder;
    writeSoon();
}

void Settings::writeSoon()
{
    m_writing.start();
}

bool Settings::write()
{
    m_writing.stop();
    QSettings file(m_file, QSettings::IniFormat);
    writeTo(file, m_values);
    file.sync();
    return file.status() == QSettings::NoError;
}

} // namespace sinewright::app

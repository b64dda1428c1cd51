// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/picture.h"

#include <QDir>
#include <QFile>
#include <QSaveFile>

namespace sinewright::app {

using namespace Qt::StringLiterals;

namespace {

constexpr int kLettersForAgain = 26;
constexpr const char* kPng = "PNG";

core::Error writeError(const QString& file, const QString& why)
{
    return {core::ErrorCode::WriteFailed,
            u"%1: cannot be written: %2; choose another folder or make room"_s.arg(file, why).toStdString()};
}

} // namespace

QString pictureName(const QDateTime& when, const QString& subjectName, int again)
{
    const QString letter = again > 0 ? QString(QChar(u'a' + again - 1)) : QString();
    return u"sinewright-%1%2-%3.png"_s.arg(when.toString(u"yyyyMMdd-HHmmss"_s), letter, subjectName);
}

core::Result<QString>
savePicture(const QImage& image, const QString& folder, const QDateTime& when, const QString& subjectName)
{
    for (int again = 0; again <= kLettersForAgain; ++again) {
        const QString path = QDir(folder).filePath(pictureName(when, subjectName, again));
        QFile file(path);
        if (!file.open(QIODevice::WriteOnly | QIODevice::NewOnly)) {
            if (file.exists()) {
                continue;
            }
            return tl::unexpected(writeError(path, file.errorString()));
        }
        if (!image.save(&file, kPng) || !file.flush()) {
            const QString why = file.errorString();
            file.remove();
            return tl::unexpected(writeError(path, why));
        }
        return path;
    }
    return tl::unexpected(writeError(folder, u"too many pictures in one second"_s));
}

core::Result<void> writePicture(const QImage& image, const QString& path)
{
    QSaveFile file(path);
    // A device such as /dev/full cannot be replaced, only written to.
    file.setDirectWriteFallback(true);
    if (!file.open(QIODevice::WriteOnly)) {
        return tl::unexpected(writeError(path, file.errorString()));
    }
    if (!image.save(&file, kPng) || !file.commit()) {
        return tl::unexpected(writeError(path, file.errorString()));
    }
    return {};
}

} // namespace sinewright::app

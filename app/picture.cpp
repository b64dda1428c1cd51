// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/picture.h"

#include <QBuffer>
#include <QByteArray>
#include <QDir>
#include <QFile>
#include <QFileInfo>
#include <QSaveFile>

namespace sinewright::app {

using namespace Qt::StringLiterals;

namespace {

constexpr int kLettersForAgain = 26;

core::Error writeError(const QString& file, const QString& why)
{
    return {core::ErrorCode::WriteFailed,
            u"%1: cannot be written: %2; choose another folder or make room"_s.arg(file, why)
                .toStdString()};
}

/// Encoded in memory first: the encoder reports a full disk on stderr in words of its own.
QByteArray pngOf(const QImage& image)
{
    QByteArray bytes;
    QBuffer buffer(&bytes);
    buffer.open(QIODevice::WriteOnly);
    image.save(&buffer, "PNG");
    return bytes;
}

bool writeWhole(QFileDevice& file, const QByteArray& bytes)
{
    return !bytes.isEmpty() && file.write(bytes) == bytes.size() && file.flush();
}

} // namespace

QString pictureName(const QDateTime& when, const QString& subjectName, int again)
{
    const QString letter = again > 0 ? QString(QChar(u'a' + again - 1)) : QString();
    return u"sinewright-%1%2-%3.png"_s.arg(
        when.toString(u"yyyyMMdd-HHmmss"_s), letter, subjectName);
}

core::Result<QString> savePicture(const QImage& image,
                                  const QString& folder,
                                  const QDateTime& when,
                                  const QString& subjectName)
{
    const QByteArray bytes = pngOf(image);
    for (int again = 0; again <= kLettersForAgain; ++again) {
        const QString path = QDir(folder).filePath(pictureName(when, subjectName, again));
        QFile file(path);
        if (!file.open(QIODevice::WriteOnly | QIODevice::NewOnly)) {
            if (file.exists()) {
                continue;
            }
            return tl::unexpected(writeError(path, file.errorString()));
        }
        if (!writeWhole(file, bytes)) {
            const QString why = file.errorString();
            file.remove();
            return tl::unexpected(writeError(path, why));
        }
        return path;
    }
    return tl::unexpected(writeError(folder, u"too many pictures in one second"_s));
}

core::Result<void> checkPicturePlace(const QString& path)
{
    const QFileInfo target(path);
    const QFileInfo folder(target.absolutePath());
    if (target.isDir()) {
        return tl::unexpected(writeError(path, u"it is a folder"_s));
    }
    if (!folder.isDir()) {
        return tl::unexpected(writeError(path, u"its folder does not exist"_s));
    }
    if (!target.exists() && !folder.isWritable()) {
        return tl::unexpected(writeError(path, u"its folder may not be written to"_s));
    }
    return {};
}

core::Result<void> writePicture(const QImage& image, const QString& path)
{
    const QByteArray bytes = pngOf(image);
    // A file is replaced whole or not at all. Anything else, such as a pipe, is written to: to replace it would be to
    // take it away from everybody.
    const QFileInfo target(path);
    if (target.exists() && !target.isFile()) {
        QFile device(path);
        if (!device.open(QIODevice::WriteOnly) || !writeWhole(device, bytes)) {
            return tl::unexpected(writeError(path, device.errorString()));
        }
        return {};
    }
    QSaveFile file(path);
    if (!file.open(QIODevice::WriteOnly) || !writeWhole(file, bytes) || !file.commit()) {
        return tl::unexpected(writeError(path, file.errorString()));
    }
    return {};
}

} // namespace sinewright::app

// Chronodrome, GPL-3.0-or-later.
#include "ui/document/journal_entry.h"

#include <QFile>
#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>

namespace chronodrome::ui {
namespace {

constexpr int kJournalVersion = 1;
constexpr QLatin1StringView kFormat("chronodrome-journal");

QString key(const char* name) {
  return QString::fromLatin1(name);
}

} // namespace

QByteArray textOf(const JournalEntry& entry) {
  QJsonObject json;
  json[key("format")] = QString(kFormat);
  json[key("version")] = kJournalVersion;
  json[key("pid")] = entry.writer.pid;
  json[key("process_start")] = QString::number(entry.writer.start);
  json[key("boot")] = entry.writer.boot;
  json[key("host")] = entry.writer.host;
  json[key("written")] = entry.written.toString(Qt::ISODateWithMs);
  json[key("title")] = entry.title;
  json[key("session_path")] = entry.session_path;
  json[key("recording_paths")] = QJsonArray::fromStringList(entry.recording_paths);
  json[key("edits")] = entry.edits;
  json[key("session")] = QString::fromStdString(entry.session);
  json[key("drug_log")] = entry.log ? QJsonValue(QString::fromStdString(*entry.log)) : QJsonValue();
  return QJsonDocument(json).toJson();
}

Result<JournalEntry> readJournal(const QString& path) {
  QFile file(path);
  if (!file.open(QIODevice::ReadOnly)) {
    return Error{ErrorCode::file_missing,
                 path.toStdString(),
                 {},
                 "the journal of unsaved edits cannot be read",
                 "look whether the file is still there and may be read"};
  }
  const QJsonObject json = QJsonDocument::fromJson(file.readAll()).object();
  if (json[key("format")].toString() != kFormat || json[key("version")].toInt() != kJournalVersion) {
    return Error{ErrorCode::wrong_format,
                 path.toStdString(),
                 {},
                 "the file is no journal of unsaved edits that this program can read",
                 "open it with the program that wrote it, or discard it"};
  }
  JournalEntry entry;
  entry.writer.pid = json[key("pid")].toInteger();
  entry.writer.start = json[key("process_start")].toString().toULongLong();
  entry.writer.boot = json[key("boot")].toString();
  entry.writer.host = json[key("host")].toString();
  entry.written = QDateTime::fromString(json[key("written")].toString(), Qt::ISODateWithMs);
  entry.title = json[key("title")].toString();
  entry.session_path = json[key("session_path")].toString();
  for (const auto& recording : json[key("recording_paths")].toArray())
    entry.recording_paths << recording.toString();
  entry.edits = json[key("edits")].toInt();
  entry.session = json[key("session")].toString().toStdString();
  if (json[key("drug_log")].isString()) entry.log = json[key("drug_log")].toString().toStdString();
  return entry;
}

} // namespace chronodrome::ui

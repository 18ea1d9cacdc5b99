// Chronodrome, GPL-3.0-or-later.
#include "ui/document/process_identity.h"

#include <QCoreApplication>
#include <QFile>
#include <QList>
#include <QSysInfo>

namespace chronodrome::ui {
namespace {

struct ProcessState {
  quint64 start = 0;
  char state = 'X'; ///< X: there is no such process
};

ProcessState stateOf(qint64 pid) {
  QFile file(QStringLiteral("/proc/%1/stat").arg(pid));
  if (!file.open(QIODevice::ReadOnly)) return {};
  const QByteArray line = file.readAll();
  // The program's name stands in brackets and may hold blanks and brackets itself.
  const auto close = line.lastIndexOf(')');
  if (close < 0) return {};
  const QList<QByteArray> fields = line.mid(close + 2).split(' '); // from field 3 on
  if (fields.size() < 20 || fields[0].isEmpty()) return {};
  return {fields[19].toULongLong(), fields[0][0]};
}

QString bootOfMachine() {
  QFile file(QStringLiteral("/proc/sys/kernel/random/boot_id"));
  if (!file.open(QIODevice::ReadOnly)) return {};
  return QString::fromLatin1(file.readAll().trimmed());
}

} // namespace

ProcessIdentity thisProcess() {
  static const QString boot = bootOfMachine();
  const qint64 pid = QCoreApplication::applicationPid();
  return {pid, stateOf(pid).start, boot, QSysInfo::machineHostName()};
}

Life lifeOf(const ProcessIdentity& process) {
  const ProcessIdentity here = thisProcess();
  if (process.host != here.host) return Life::elsewhere;
  if (process.boot != here.boot) return Life::dead;
  const ProcessState now = stateOf(process.pid);
  const bool runs = now.state != 'X' && now.state != 'Z' && now.start == process.start;
  return runs ? Life::alive : Life::dead;
}

} // namespace chronodrome::ui

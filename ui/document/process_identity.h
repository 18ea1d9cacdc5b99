// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QString>

namespace chronodrome::ui {

/// Which process, of all that ever ran: numbers of processes come again, also after a restart of the machine.
struct ProcessIdentity {
  qint64 pid = 0;
  quint64 start = 0; ///< ticks from the machine's start (field 22 of /proc/PID/stat); 0: not known
  QString boot;      ///< changes with every start of the machine
  QString host;
  bool operator==(const ProcessIdentity&) const = default;
};

/// Of the process that asks.
ProcessIdentity thisProcess();

enum class Life { alive, dead, elsewhere };
/// `elsewhere`: on another machine, where nothing can be known. A process that has ended and waits to be
/// collected by its parent is dead.
Life lifeOf(const ProcessIdentity& process);

} // namespace chronodrome::ui

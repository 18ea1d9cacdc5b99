// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <QString>

namespace chronodrome::ui {

// Folders of the XDG base directory specification 0.8; they are named here, not made. A variable that holds
// no absolute path counts as unset, as the specification says. In Qt's test mode they lie where Qt's do.

/// `$XDG_STATE_HOME/chronodrome`, else `~/.local/state/chronodrome`: what a crash must not lose.
QString stateFolder();
/// `$XDG_CONFIG_HOME/chronodrome`, else `~/.config/chronodrome`.
QString configFolder();
/// Where the journals of unsaved edits lie.
QString recoveryFolder();

/// One spelling of a path, from the root and without `..`; empty stays empty.
QString absolutePath(const QString& path);

} // namespace chronodrome::ui

// Chronodrome, GPL-3.0-or-later.
#include "protocol/stretches.h"

#include <algorithm>

namespace chronodrome::protocol {

std::vector<Stretch> stretches_of(const Protocol& protocol, EventKind start, EventKind stop, Seconds end,
                                  std::vector<Warning>& warnings) {
  std::vector<Stretch> found;
  const Event* open = nullptr;
  const auto warn = [&](const Event& event, std::string what, std::string remedy) {
    warnings.push_back({protocol.file, event.line > 0 ? Place::at_line(event.line) : Place{}, std::move(what),
                        std::move(remedy)});
  };
  const auto close = [&](Seconds from, Seconds to) {
    const Stretch cut{std::clamp(from, Seconds(0.0), end), std::clamp(to, Seconds(0.0), end)};
    if (cut.end > cut.start) found.push_back(cut);
  };
  for (const Event& event : protocol.events) {
    if (event.kind == start && open == nullptr) {
      open = &event;
    } else if (event.kind == start) {
      warn(event, name_of(start) + " while the one before still runs",
           "log the " + name_of(stop) + " between; this row is passed over");
    } else if (event.kind == stop && open != nullptr) {
      close(open->time, event.time);
      open = nullptr;
    } else if (event.kind == stop) {
      warn(event, name_of(stop) + " with no " + name_of(start) + " before it",
           "log the start; this row is passed over");
    }
  }
  if (open != nullptr && open->time < end) {
    warn(*open, name_of(start) + " is never followed by " + name_of(stop),
         "log the stop; it is taken to last to the end of the recording");
    close(open->time, end);
  }
  return found;
}

} // namespace chronodrome::protocol

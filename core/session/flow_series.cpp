// Chronodrome, GPL-3.0-or-later.
#include "session/flow_series.h"

#include <algorithm>
#include <cmath>

namespace chronodrome::session {

response::FlowSeries second_means(const recording::Channel& channel) {
  response::FlowSeries series{channel.label, channel.unit, {}, {}};
  const auto per_second =
      static_cast<std::size_t>(std::max(1.0, std::round(channel.time_base().rate().value())));
  std::vector<double> samples(per_second);
  for (const auto& run : channel.time_base().runs()) {
    for (std::size_t at = 0; at + per_second <= run.count; at += per_second) {
      channel.read(run.first + at, samples);
      double sum = 0.0;
      for (const double sample : samples)
        sum += sample;
      const double middle = static_cast<double>(run.first + at) + 0.5 * static_cast<double>(per_second - 1);
      series.times.push_back(channel.time_at(middle));
      series.values.push_back(sum / static_cast<double>(per_second));
    }
  }
  return series;
}

} // namespace chronodrome::session

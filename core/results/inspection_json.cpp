// Chronodrome, GPL-3.0-or-later.
#include "results/inspection_json.h"

#include "base/json_text.h"

namespace chronodrome::results {
namespace {

void write_signal(JsonText& json, const recording::Signal& signal, const session::SignalLook& look) {
  json.open_object().text("source", signal.source_as_written).text("unit", signal.unit);
  json.number("rate_hz", signal.time_base.rate().value()).count("samples", signal.time_base.size());
  json.number("start_s", signal.time_base.start().value()).number("end_s", signal.time_base.end().value());
  json.open_list("gaps");
  for (const auto& gap : signal.time_base.gaps()) {
    json.open_object().number("start_s", gap.start.value()).number("end_s", gap.end.value()).close_object();
  }
  json.close_list().number("resolution", signal.resolution);
  if (signal.rails) {
    json.open_object("range")
        .number("min", (*signal.rails)[0])
        .number("max", (*signal.rails)[1])
        .close_object();
  } else {
    json.null("range");
  }
  json.text("prefilter", signal.prefilter)
      .open_object("quality")
      .number("min", look.min)
      .number("max", look.max);
  json.number("noise_sd", look.noise_sd).number("clipped_share", look.clipped_share);
  json.number("unreadable_share", look.unreadable_share).open_list("reasons");
  for (const auto& reason : look.reasons)
    json.item(reason);
  json.close_list().close_object().close_object();
}

} // namespace

std::string inspection_json(const recording::Recording& recording,
                            std::span<const session::SignalLook> looks) {
  JsonText json;
  json.open_object().text("format", "chronodrome-inspection").count("version", 1);
  json.number("duration_s", recording.duration.value());
  if (recording.clock_start) {
    json.text("clock_time_of_zero", *recording.clock_start);
  } else {
    json.null("clock_time_of_zero");
  }
  json.number("file_time_of_zero_s", recording.file_time_of_zero.value()).open_list("files");
  for (const auto& file : recording.files) {
    json.open_object()
        .text("path", file.path)
        .text("kind", file.kind)
        .text("sha256", file.sha256)
        .count("bytes", file.bytes);
    json.close_object();
  }
  json.close_list().open_list("signals");
  for (std::size_t i = 0; i < recording.signals.size(); ++i)
    write_signal(json, recording.signals[i], looks[i]);
  json.close_list().open_list("annotations");
  for (const auto& annotation : recording.annotations) {
    json.open_object().number("onset_s", annotation.onset.value());
    json.number("duration_s",
                annotation.duration ? std::optional(annotation.duration->value()) : std::nullopt);
    json.text("text", annotation.text).close_object();
  }
  json.close_list().open_list("notes");
  for (const auto& note : recording.file_notes)
    json.item(note);
  json.close_list().open_list("warnings");
  for (const auto& warning : recording.warnings)
    json.item(describe(warning));
  json.close_list().close_object();
  return json.take();
}

} // namespace chronodrome::results

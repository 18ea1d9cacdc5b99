// Chronodrome, GPL-3.0-or-later.
#include "intake/annotation_protocol.h"

#include <array>
#include <optional>
#include <string_view>

#include "base/number_text.h"
#include "intake/protocol_order.h"
#include "intake/text_file.h"
#include "protocol/concentration.h"

namespace chronodrome::intake {
namespace {

using protocol::Event;
using protocol::EventKind;

/// How people begin a text that was meant as an event.
constexpr std::array<std::string_view, 7> kBeginnings = {"add",     "antag",  "wash", "vehic",
                                                         "exclude", "pacing", "pace"};

std::vector<std::string> words_of(const std::string& text) {
  std::vector<std::string> words;
  std::string word;
  for (const char c : text + " ") {
    if (c == ' ' || c == '\t' || c == '\n' || c == '\r') {
      if (!word.empty()) words.push_back(std::move(word));
      word.clear();
    } else {
      word += c;
    }
  }
  return words;
}

std::string joined(const std::vector<std::string>& words, std::size_t from, std::size_t to) {
  std::string text;
  for (std::size_t i = from; i < to; ++i)
    text += (text.empty() ? "" : " ") + words[i];
  return text;
}

/// A concentration among the words: where it begins and how many words it takes.
struct Found {
  std::size_t at = 0;
  std::size_t words = 0;
  double value = 0.0;
  std::string unit;
};

/// `100nM`: the longest number in front, with a unit as all the rest.
std::optional<Found> attached(const std::string& word, std::size_t at) {
  for (std::size_t length = word.size() - 1; length > 0; --length) {
    const std::string unit = word.substr(length);
    if (!protocol::concentration_in(1.0, unit)) continue;
    const auto value = parse_number(word.substr(0, length));
    if (value) return Found{at, 1, *value, unit};
  }
  return std::nullopt;
}

std::optional<Found> first_concentration(const std::vector<std::string>& words) {
  for (std::size_t i = 1; i < words.size(); ++i) {
    const auto value = parse_number(words[i]);
    if (value && i + 1 < words.size() && protocol::concentration_in(1.0, words[i + 1]))
      return Found{i, 2, *value, words[i + 1]};
    if (const auto one = attached(words[i], i)) return one;
  }
  return std::nullopt;
}

bool looks_like_event(const std::string& word) {
  const std::string lower = lower_case(word);
  for (const auto beginning : kBeginnings) {
    if (lower.substr(0, beginning.size()) == beginning) return true;
  }
  return false;
}

/// What keeps the words from being an event, or nothing.
std::optional<std::string> read_event(const std::vector<std::string>& words, EventKind kind, Event& event) {
  event.kind = kind;
  const bool takes_agent = kind == EventKind::addition || kind == EventKind::antagonist ||
                           kind == EventKind::washout || kind == EventKind::vehicle;
  const bool needs_value = kind == EventKind::addition || kind == EventKind::antagonist;
  if (!takes_agent) {
    event.note = joined(words, 1, words.size());
    return std::nullopt;
  }
  const auto found = first_concentration(words);
  const std::size_t agent_end = found ? found->at : words.size();
  event.agent = joined(words, 1, agent_end);
  if (!found)
    return needs_value ? std::optional<std::string>("it holds no number with a unit") : std::nullopt;
  if (found->value < 0.0) return "its concentration is negative";
  if (needs_value && event.agent.empty()) return "it names no agent";
  event.unit = found->unit;
  event.concentration = protocol::concentration_in(found->value, found->unit);
  event.note = joined(words, found->at + found->words, words.size());
  return std::nullopt;
}

} // namespace

protocol::Protocol protocol_from_annotations(const std::vector<recording::Annotation>& annotations,
                                             const std::string& file) {
  protocol::Protocol protocol;
  for (const auto& annotation : annotations) {
    const auto words = words_of(annotation.text);
    if (words.empty()) continue;
    const auto kind = protocol::event_named(lower_case(words.front()));
    Event event;
    event.time = annotation.onset;
    std::optional<std::string> fault;
    if (kind) {
      fault = read_event(words, *kind, event);
      if (!fault) {
        protocol.events.push_back(std::move(event));
        continue;
      }
    } else if (looks_like_event(words.front())) {
      fault = "it begins with none of " + protocol::event_names();
    }
    if (fault) {
      protocol.warnings.push_back({file,
                                   {},
                                   "the annotation " + shown(annotation.text) + " at " +
                                       number_text(annotation.onset.value()) + " s is no event: " + *fault,
                                   "write it as EVENT AGENT VALUE UNIT, or give the log in a file"});
    }
  }
  put_in_order(protocol);
  const bool binary = file.size() > 4 && lower_case(file.substr(file.size() - 4)) == ".edf";
  for (auto& warning : protocol.warnings) {
    warning.file = file;
    if (binary && !warning.place.line) warning.place = Place::at_byte(0);
  }
  return protocol;
}

} // namespace chronodrome::intake

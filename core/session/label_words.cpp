// Chronodrome, GPL-3.0-or-later.
#include "session/label_words.h"

#include <algorithm>
#include <array>
#include <optional>
#include <regex>
#include <string_view>

#include "base/number_text.h"

namespace chronodrome::session {
namespace {

using recording::Role;

struct Known {
  std::string_view text;
  Role role;
};

/// Beginnings of words that are written out. `kamer` and `kammer` are ventricles, `voorkamer` and `vorkammer`
/// atria: a word is compared from its beginning, so that they do not meet.
constexpr std::array<Known, 56> kStems = {{
    {"atri", Role::atrial},
    {"vorhof", Role::atrial},
    {"vorkammer", Role::atrial},
    {"oreillette", Role::atrial},
    {"auricul", Role::atrial},
    {"auricle", Role::atrial},
    {"voorkamer", Role::atrial},
    {"boezem", Role::atrial},
    {"formak", Role::atrial},
    {"przedsion", Role::atrial},
    {"ventri", Role::ventricular},
    {"kammer", Role::ventricular},
    {"kamer", Role::ventricular},
    {"komor", Role::ventricular},
    {"herzkammer", Role::ventricular},
    {"hartkamer", Role::ventricular},
    {"hisb", Role::his},
    {"sinus", Role::sinus},
    {"sinoatrial", Role::sinus},
    {"tension", Role::tension},
    {"force", Role::tension},
    {"kraft", Role::tension},
    {"fuerza", Role::tension},
    {"forza", Role::tension},
    {"forca", Role::tension},
    {"kracht", Role::tension},
    {"isometr", Role::tension},
    {"contracti", Role::tension},
    {"kontrakt", Role::tension},
    {"sila", Role::tension},
    {"press", Role::pressure},
    {"druck", Role::pressure},
    {"presion", Role::pressure},
    {"druk", Role::pressure},
    {"tryck", Role::pressure},
    {"cisnien", Role::pressure},
    {"stim", Role::stimulus},
    {"pacing", Role::stimulus},
    {"paced", Role::stimulus},
    {"reiz", Role::stimulus},
    {"estimul", Role::stimulus},
    {"prikkel", Role::stimulus},
    {"flow", Role::flow},
    {"fluss", Role::flow},
    {"debit", Role::flow},
    {"flujo", Role::flow},
    {"caudal", Role::flow},
    {"flusso", Role::flow},
    {"debiet", Role::flow},
    {"tempera", Role::temperature},
    {"electrocardiogr", Role::ecg},
    {"elektrokardiogr", Role::ecg},
    {"monophasic", Role::map},
    {"monophasisch", Role::map},
    {"flode", Role::flow},
    {"przeplyw", Role::flow},
}};

/// Whole words only. Short forms that mean other things as often (SA, CS, AD, T, F, P) are left out on
/// purpose; A, H and V are the trade's own names of the three deflections.
constexpr std::array<Known, 38> kShort = {{
    {"a", Role::atrial},         {"ra", Role::atrial},
    {"la", Role::atrial},        {"hra", Role::atrial},
    {"mra", Role::atrial},       {"lra", Role::atrial},
    {"raa", Role::atrial},       {"laa", Role::atrial},
    {"atr", Role::atrial},       {"h", Role::his},
    {"hb", Role::his},           {"hbe", Role::his},
    {"v", Role::ventricular},    {"rv", Role::ventricular},
    {"lv", Role::ventricular},   {"rva", Role::ventricular},
    {"lva", Role::ventricular},  {"rvot", Role::ventricular},
    {"vd", Role::ventricular},   {"vg", Role::ventricular},
    {"ven", Role::ventricular},  {"sn", Role::sinus},
    {"san", Role::sinus},        {"lvp", Role::pressure},
    {"lvdp", Role::pressure},    {"rvp", Role::pressure},
    {"lvedp", Role::pressure},   {"cpp", Role::pressure},
    {"ecg", Role::ecg},          {"ekg", Role::ecg},
    {"map", Role::map},          {"cf", Role::flow},
    {"stm", Role::stimulus},     {"trig", Role::stimulus},
    {"frc", Role::tension},      {"pace", Role::stimulus},
    {"temp", Role::temperature}, {"ventr", Role::ventricular},
}};

struct Word {
  std::string plain;      ///< lower case, without accents
  std::string as_written; ///< as it stands
};

/// Letters of Latin-1 and some of Latin Extended-A without their accents, for comparison only.
std::string plain_letter(unsigned char lead, unsigned char next) {
  if (lead == 0xC3U) {
    const unsigned code = (next | 0x20U) + 0x40U; // lower case, as in Latin-1
    static constexpr std::string_view kPlain = "aaaaaaaceeeeiiiidnooooo/ouuuuyty";
    if (next == 0x9FU) return "ss";
    const bool is_sign = code == 0xF7U; // times and divided-by
    if (code >= 0xE0U && code <= 0xFFU && !is_sign) return std::string(1, kPlain[code - 0xE0U]);
  }
  if (lead == 0xC4U && (next == 0x84U || next == 0x85U)) return "a";
  if (lead == 0xC4U && (next == 0x86U || next == 0x87U)) return "c";
  if (lead == 0xC4U && (next == 0x98U || next == 0x99U)) return "e";
  if (lead == 0xC5U && (next == 0x81U || next == 0x82U)) return "l";
  if (lead == 0xC5U && (next == 0x83U || next == 0x84U)) return "n";
  if (lead == 0xC5U && (next == 0x9AU || next == 0x9BU)) return "s";
  return "";
}

bool is_letter(char c) {
  return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
}

std::vector<Word> words_of(const std::string& label) {
  std::vector<Word> words(1);
  for (std::size_t i = 0; i < label.size(); ++i) {
    const char c = label[i];
    if (is_letter(c)) {
      words.back().plain += lower_case(std::string_view(&c, 1));
      words.back().as_written += c;
      continue;
    }
    const bool pair = static_cast<unsigned char>(c) >= 0xC3U && i + 1 < label.size();
    const std::string plain =
        pair ? plain_letter(static_cast<unsigned char>(c), static_cast<unsigned char>(label[i + 1])) : "";
    if (!plain.empty()) {
      words.back().plain += plain;
      words.back().as_written += label.substr(i, 2);
      ++i;
    } else if (!words.back().plain.empty()) {
      words.emplace_back();
    }
  }
  if (words.back().plain.empty()) words.pop_back();
  return words;
}

bool begins_with(const std::string& word, std::string_view stem) {
  return word.compare(0, stem.size(), stem) == 0;
}

struct Meaning {
  Role role;
  bool written_out;
};

/// `alone`: the label has no other word. A letter beside other words is a number ("channel A").
std::optional<Meaning> meaning_of(const std::string& word, bool alone) {
  if (word.size() == 1 && !alone) return std::nullopt;
  if (word == "his") return Meaning{Role::his, true};
  for (const Known& known : kShort) {
    if (word == known.text) return Meaning{known.role, false};
  }
  for (const Known& known : kStems) {
    if (begins_with(word, known.text)) return Meaning{known.role, true};
  }
  return std::nullopt;
}

bool names_lead(const std::string& word) {
  return begins_with(word, "bip") || begins_with(word, "unip") || word == "uni" || begins_with(word, "monop");
}

char side_of(const std::string& word) {
  for (const std::string_view stem :
       {"right", "recht", "droit", "derech", "destr", "direit", "hoger", "praw"}) {
    if (begins_with(word, stem)) return 'R';
  }
  for (const std::string_view stem :
       {"left", "link", "gauche", "izquierd", "sinistr", "esquerd", "vanster", "lew"}) {
    if (begins_with(word, stem)) return 'L';
  }
  return '\0';
}

bool is_chamber(Role role) {
  return role == Role::sinus || role == Role::atrial || role == Role::his || role == Role::ventricular;
}

/// The coronary sinus lies between atrium and ventricle and shows both: no chamber, though `sinus` is one.
bool names_coronary_sinus(const std::vector<Word>& words) {
  const auto has = [&](std::string_view stem) {
    return std::any_of(words.begin(), words.end(), [&](const Word& w) { return begins_with(w.plain, stem); });
  };
  return has("sinus") && (has("coron") || has("koron"));
}

} // namespace

std::string name_of(Confidence confidence) {
  switch (confidence) {
  case Confidence::sure:
    return "sure";
  case Confidence::guessed:
    return "guessed";
  case Confidence::unknown:
    break;
  }
  return "unknown";
}

LabelReading read_label(const std::string& label) {
  LabelReading reading;
  const auto words = words_of(label);
  std::optional<Meaning> chamber, quantity;
  std::string chamber_word, quantity_word;
  // "A bip" is an atrial lead, "channel A" the first of many.
  const auto others =
      std::count_if(words.begin(), words.end(), [](const Word& w) { return !names_lead(w.plain); });
  for (const Word& word : words) {
    if (reading.side == '\0') reading.side = side_of(word.plain);
    const auto meaning = meaning_of(word.plain, others == 1);
    if (!meaning) continue;
    auto& kept = is_chamber(meaning->role) ? chamber : quantity;
    auto& kept_word = is_chamber(meaning->role) ? chamber_word : quantity_word;
    const bool another = kept && kept->role != meaning->role;
    if (another && is_chamber(meaning->role)) {
      const bool sinus = kept->role == Role::sinus || meaning->role == Role::sinus;
      // "sinus node, right atrium" is the sinus; "atrium-ventricle" is no chamber.
      if (!sinus) reading.two_chambers = true;
      if (meaning->role != Role::sinus) continue;
    }
    if (!kept || another || (meaning->written_out && !kept->written_out)) {
      kept = meaning;
      kept_word = word.as_written;
    }
  }
  // "LV pressure" is a pressure, "atrial stimulus" a stimulus.
  const auto& told = quantity ? quantity : chamber;
  if (!told || (!quantity && (reading.two_chambers || names_coronary_sinus(words)))) return reading;
  reading.two_chambers = reading.two_chambers && !quantity;
  reading.role = told->role;
  reading.confidence = told->written_out ? Confidence::sure : Confidence::guessed;
  reading.word = quantity ? quantity_word : chamber_word;
  return reading;
}

LeadReading read_lead(const std::string& label) {
  for (const Word& word : words_of(label)) {
    if (begins_with(word.plain, "bip")) return {recording::Lead::bipolar, word.as_written};
    if (begins_with(word.plain, "unip") || word.plain == "uni" || begins_with(word.plain, "monop"))
      return {recording::Lead::unipolar, word.as_written};
  }
  static const std::regex pair(R"(([A-Za-z]*) ?(\d+) ?[-/] ?([A-Za-z]*) ?(\d+))");
  std::smatch match;
  if (std::regex_search(label, match, pair)) {
    const bool same_name = match[3].length() == 0 || match[1] == match[3];
    if (same_name && match[2] != match[4]) return {recording::Lead::bipolar, match[0]};
  }
  return {};
}

recording::Role role_of_unit(const std::string& unit) {
  const auto is_one_of = [&](std::initializer_list<const char*> units) {
    return std::any_of(units.begin(), units.end(), [&](const char* known) { return unit == known; });
  };
  if (is_one_of({"N", "mN", "uN", "g", "mg", "gf"})) return Role::tension;
  if (is_one_of({"mmHg", "cmH2O", "kPa", "Pa", "mbar", "bar"})) return Role::pressure;
  if (is_one_of({"mL/min", "ml/min", "L/min", "l/min", "mL/s", "uL/min"})) return Role::flow;
  if (is_one_of({"degC",
                 "\xC2\xB0"
                 "C",
                 "K"}))
    return Role::temperature;
  return Role::other;
}

bool is_electrical_unit(const std::string& unit) {
  for (const char* known : {"V", "mV", "uV", "nV", "Volt", "volt", "Volts", "volts", "counts", ""}) {
    if (unit == known) return true;
  }
  return false;
}

} // namespace chronodrome::session

// Chronodrome, GPL-3.0-or-later.
#include "session/order_check.h"

#include <algorithm>
#include <optional>

#include "activation/compute.h"
#include "base/number_text.h"
#include "numerics/robust.h"
#include "session/label_words.h"

namespace chronodrome::session {
namespace {

using document::ChannelEntry;
using recording::Role;

constexpr Seconds kLook{60.0};
constexpr std::size_t kFewest = 10; // beats on either channel: fewer say nothing about an order
constexpr double kPaired = 0.9;     // share of beats that must have their partner
constexpr double kClear = 2.0;      // the lag must be this many times the lead
constexpr Seconds kTogether{5e-3};  // closer marks are one deflection seen twice

/// The first samples of another store.
class FirstSamples final : public recording::SampleStore {
public:
  FirstSamples(std::shared_ptr<const recording::SampleStore> whole, std::size_t size)
      : whole_(std::move(whole)), size_(size) {}
  [[nodiscard]] std::size_t size() const override { return size_; }
  void read(std::size_t first, std::span<double> out) const override { whole_->read(first, out); }

private:
  std::shared_ptr<const recording::SampleStore> whole_;
  std::size_t size_;
};

/// The signal cut after the first minute, as a recording of its own.
std::shared_ptr<const recording::Recording> first_minute(const recording::Signal& signal) {
  auto cut = std::make_shared<recording::Recording>();
  recording::Signal part = signal;
  const std::size_t size = signal.time_base.first_at_or_after(signal.time_base.start() + kLook);
  std::vector<recording::Run> runs;
  for (const auto& run : signal.time_base.runs()) {
    if (run.first < size) runs.push_back({run.first, std::min(run.count, size - run.first), run.start});
  }
  if (runs.empty()) return nullptr;
  part.time_base = recording::TimeBase(signal.time_base.rate(), std::move(runs));
  part.samples = std::make_shared<FirstSamples>(signal.samples, size);
  part.envelope = recording::Envelope::of(*part.samples);
  cut->duration = part.time_base.end();
  cut->signals.push_back(std::move(part));
  return cut;
}

std::vector<double> beats_of(const ChannelEntry& entry, const recording::Signal& signal, Role role,
                             const std::string& species) {
  recording::Channel channel;
  channel.label = entry.label;
  channel.role = role;
  channel.lead = recording::lead_named(entry.lead).value_or(recording::Lead::none);
  if (channel.lead == recording::Lead::none) channel.lead = recording::Lead::bipolar;
  channel.unit = signal.unit;
  channel.recording = first_minute(signal);
  if (!channel.recording) return {};
  activation::ActivationSettings settings;
  settings.conditioning.species = species;
  const auto found = activation::compute(channel, settings);
  std::vector<double> times;
  if (!found) return times;
  for (const auto& mark : found->marks)
    times.push_back(mark.time.value());
  return times;
}

/// How one train of beats follows another.
struct Following {
  double share = 0.0; ///< of the first train's beats that have exactly one of the second's before the next
  double delay = 0.0; ///< median, seconds
};

Following following(const std::vector<double>& first, const std::vector<double>& second) {
  Following result;
  std::vector<double> delays;
  std::size_t k = 0;
  for (std::size_t i = 0; i + 1 < first.size(); ++i) {
    while (k < second.size() && second[k] < first[i])
      ++k;
    const bool one = k < second.size() && second[k] < first[i + 1] &&
                     (k + 1 >= second.size() || second[k + 1] >= first[i + 1]);
    if (one) delays.push_back(second[k] - first[i]);
  }
  if (first.size() < kFewest || delays.empty()) return result;
  result.share = static_cast<double>(delays.size()) / static_cast<double>(first.size() - 1);
  result.delay = numerics::median(delays);
  return result;
}

/// One electrogram with its beats.
struct Train {
  const ChannelEntry* entry = nullptr;
  Role role = Role::other;
  std::vector<double> beats;
};

std::string ms(double seconds) {
  return fixed_text(1e3 * seconds, 0) + " ms";
}

/// True where `a` leads `b` beat by beat, by the smaller part of the cycle.
bool leads(const Train& a, const Train& b, Following& lead) {
  lead = following(a.beats, b.beats);
  const Following lag = following(b.beats, a.beats);
  return lead.share >= kPaired && lag.share >= kPaired && lead.delay > kTogether.value() &&
         lag.delay > kClear * lead.delay;
}

std::optional<RoleDoubt> doubt_about(const Train& atrial, const Train& ventricular) {
  Following lead;
  if (!leads(ventricular, atrial, lead)) return std::nullopt;
  const std::string& v = ventricular.entry->label;
  const std::string& a = atrial.entry->label;
  return RoleDoubt{v + " (ventricular) fires " + ms(lead.delay) + " before " + a + " (atrial) in " +
                       fixed_text(100.0 * lead.share, 0) +
                       " % of the beats of the first minute: the two may be swapped, unless a ventricular "
                       "pacemaker drives the atrium",
                   {{a, recording::name_of(Role::ventricular)}, {v, recording::name_of(Role::atrial)}}};
}

std::optional<RoleDoubt> proposal_for(const Train& one, const Train& other) {
  Following lead;
  const bool one_leads = leads(one, other, lead);
  if (!one_leads && !leads(other, one, lead)) return std::nullopt;
  const Train& first = one_leads ? one : other;
  const Train& second = one_leads ? other : one;
  return RoleDoubt{first.entry->label + " fires " + ms(lead.delay) + " before " + second.entry->label +
                       " in " + fixed_text(100.0 * lead.share, 0) +
                       " % of the beats of the first minute, as an atrial before a ventricular electrode",
                   {{first.entry->label, recording::name_of(Role::atrial)},
                    {second.entry->label, recording::name_of(Role::ventricular)}}};
}

} // namespace

std::vector<RoleDoubt> check_order(const document::SessionFile& session,
                                   const std::shared_ptr<const recording::Recording>& recording) {
  std::vector<Train> atrial, ventricular, open;
  for (const auto& entry : session.channels) {
    const recording::Signal* signal = recording->find(entry.source);
    const Role role = recording::role_named(entry.role).value_or(Role::other);
    if (signal == nullptr || signal->time_base.size() == 0) continue;
    const bool unnamed = role == Role::other && is_electrical_unit(signal->unit);
    if (role != Role::atrial && role != Role::ventricular && !unnamed) continue;
    auto& trains = role == Role::atrial ? atrial : role == Role::ventricular ? ventricular : open;
    // A signal without a role is looked at by the rules of ventricles, the slower ones.
    const Role as = role == Role::atrial ? Role::atrial : Role::ventricular;
    trains.push_back({&entry, role, beats_of(entry, *signal, as, session.preparation.species)});
  }
  std::vector<RoleDoubt> doubts;
  for (const Train& a : atrial) {
    for (const Train& v : ventricular) {
      if (auto doubt = doubt_about(a, v)) doubts.push_back(std::move(*doubt));
    }
  }
  // With more than two there are too many ways to call them.
  if (open.size() == 2 && atrial.empty() && ventricular.empty()) {
    if (auto proposed = proposal_for(open[0], open[1])) doubts.push_back(std::move(*proposed));
  }
  return doubts;
}

} // namespace chronodrome::session

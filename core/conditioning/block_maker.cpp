// Chronodrome, GPL-3.0-or-later.
#include "conditioning/block_maker.h"

#include <algorithm>
#include <cmath>

#include "base/number_text.h"

namespace chronodrome::conditioning {
namespace {

constexpr int kOrder = 2;

/// Straight lines over the samples that `flags` says cannot be read.
void bridge(std::span<const std::uint8_t> flags, std::span<double> samples) {
  const std::size_t n = samples.size();
  std::size_t i = 0;
  while (i < n) {
    if ((flags[i] & kUnreadable) == 0) {
      ++i;
      continue;
    }
    std::size_t j = i;
    while (j < n && (flags[j] & kUnreadable) != 0)
      ++j;
    const double left = i > 0 ? samples[i - 1] : (j < n ? samples[j] : 0.0);
    const double right = j < n ? samples[j] : left;
    const double width = static_cast<double>(j - i + 1);
    for (std::size_t k = i; k < j; ++k)
      samples[k] = left + (right - left) * static_cast<double>(k - i + 1) / width;
    i = j;
  }
}

std::string hertz_text(Hertz f) {
  return number_text(f.value(), 6) + " Hz";
}

} // namespace

BlockMaker::BlockMaker(const recording::Channel& channel, const ConditioningSettings& settings)
    : channel_(channel), settings_(settings), rate_(channel.time_base().rate()) {
  if (channel.raw().rails) {
    const auto& raw = *channel.raw().rails;
    rails_ = {raw[0] * channel.gain + channel.offset, raw[1] * channel.gain + channel.offset};
  }
  design(traits_of(settings.species));
}

void BlockMaker::warn(const std::string& what, const std::string& remedy) {
  warnings_.push_back({"", {}, "channel " + channel_.label + ": " + what, remedy});
}

void BlockMaker::design(const SpeciesTraits& traits) {
  using numerics::Pass;
  const auto low_pass = [&](Hertz cutoff) {
    const Hertz designed = numerics::cutoff_for_two_passes(Pass::low, kOrder, cutoff, rate_);
    const auto sections = numerics::butterworth(Pass::low, kOrder, designed, rate_);
    if (sections.ok()) low_pass_ = *sections;
  };
  if (recording::is_electrogram(channel_.role)) {
    method_ = "mains by local regression where present";
    if (settings_.timing_low_pass > Hertz(0.0) && rate_ >= settings_.timing_low_pass * 4.0) {
      low_pass(settings_.timing_low_pass);
      method_ += ", zero-phase low-pass " + hertz_text(settings_.timing_low_pass);
    }
    const Hertz corner = settings_.detection_high_pass.value_or(traits.detection_high_pass);
    if (corner < rate_ * 0.25) {
      const Hertz designed = numerics::cutoff_for_two_passes(Pass::high, kOrder, corner, rate_);
      const auto sections = numerics::butterworth(Pass::high, kOrder, designed, rate_);
      if (sections.ok()) high_pass_ = *sections;
      method_ += "; detection only: zero-phase high-pass " + hertz_text(corner);
    }
    const bool unipolar = channel_.lead == recording::Lead::unipolar;
    const double lowest = unipolar ? 500.0 : 400.0;
    if (rate_.value() < lowest) {
      warn("sampled at " + hertz_text(rate_) + "; below " + number_text(lowest, 3) +
               " Hz activation times can be off by more than 4 ms",
           "record electrograms at 1000 Hz or more; read delays of this channel with care");
    }
  } else if (recording::is_mechanical(channel_.role)) {
    const Hertz cutoff = settings_.mechanical_low_pass.value_or(
        channel_.role == recording::Role::tension ? traits.tension_low_pass : traits.pressure_low_pass);
    if (cutoff < rate_ * 0.4) {
      low_pass(cutoff);
      method_ = "zero-phase low-pass " + hertz_text(cutoff);
    } else {
      method_ = "no filter";
    }
  }
}

double BlockMaker::step_of(std::span<const double> raw) const {
  const double stated = channel_.raw().resolution * std::abs(channel_.gain);
  return stated > 0.0 ? stated : smallest_step(raw);
}

const ConditionedBlock& BlockMaker::make(std::size_t run, std::size_t core_first, std::size_t core_end,
                                         StillWatch& still) {
  const recording::Run& whole = channel_.time_base().runs()[run];
  const auto context = static_cast<std::size_t>(std::llround(settings_.context.value() * rate_.value()));
  const std::size_t low = core_first > context ? core_first - context : 0;
  const std::size_t high = std::min(whole.count, core_end + context);
  ConditionedBlock& block = block_;
  block.hum.clear();
  block.detection.clear();
  block.run = run;
  block.first = whole.first + low;
  block.core_first = whole.first + core_first;
  block.core_end = whole.first + core_end;
  block.timing.resize(high - low);
  block.flags.assign(high - low, 0);
  channel_.read(block.first, block.timing);
  block.step = step_of(block.timing);
  still.look_at(block.timing, block.first, block.core_first, block.core_end, block.step);
  flag_clipping(block.timing, block);
  flag_blanked(block);
  if (recording::is_electrogram(channel_.role)) {
    condition_electrogram(block, low);
  } else if (recording::is_mechanical(channel_.role)) {
    condition_mechanical(block);
  }
  return block;
}

void BlockMaker::flag_clipping(std::span<const double> raw, ConditionedBlock& block) {
  saturated_.clear();
  const double fs = rate_.value();
  const auto recovery = static_cast<std::size_t>(std::llround(settings_.clip_recovery.value() * fs));
  for (const SampleRange& run : find_clipping(raw, rate_, block.step, rails_)) {
    for (std::size_t i = run.first; i < run.end; ++i)
      block.flags[i] |= kClipped;
    if (static_cast<double>(run.end - run.first) < settings_.longest_clip.value() * fs) continue;
    const std::size_t end = std::min(raw.size(), run.end + recovery);
    for (std::size_t i = run.first; i < end; ++i)
      block.flags[i] |= kUnreadable;
    saturated_.push_back({block.first + run.first, block.first + end});
  }
  saturated_ = joined(std::move(saturated_));
}

void BlockMaker::flag_blanked(ConditionedBlock& block) const {
  const double fs = rate_.value();
  const double start = channel_.time_at(static_cast<double>(block.first)).value();
  const double end = start + static_cast<double>(block.flags.size()) / fs;
  const auto& spans = settings_.blanked;
  auto span = std::partition_point(spans.begin(), spans.end(),
                                   [&](const recording::Span& s) { return s.end.value() <= start; });
  for (; span != spans.end() && span->start.value() < end; ++span) {
    const double low = std::max(0.0, std::ceil((span->start.value() - start) * fs - 1e-6));
    const double high = std::min(static_cast<double>(block.flags.size()) - 1.0,
                                 std::floor((span->end.value() - start) * fs + 1e-6));
    for (double i = low; i <= high; i += 1.0)
      block.flags[static_cast<std::size_t>(i)] |= kUnreadable;
  }
}

void BlockMaker::condition_electrogram(ConditionedBlock& block, std::size_t offset) const {
  block.hum = remove_hum(block.timing, block.flags, rate_, offset, settings_.mains);
  for (HumStretch& stretch : block.hum)
    stretch.first += block.first, stretch.end += block.first;
  bridge(block.flags, block.timing);
  if (!low_pass_.empty()) numerics::filter_zero_phase(low_pass_, block.timing);
  block.detection = block.timing;
  if (!high_pass_.empty()) numerics::filter_zero_phase(high_pass_, block.detection);
}

void BlockMaker::condition_mechanical(ConditionedBlock& block) const {
  bridge(block.flags, block.timing);
  block.detection.assign(block.timing.size(), 0.0);
  if (low_pass_.empty()) return;
  block.detection = block.timing;
  numerics::filter_zero_phase(low_pass_, block.timing);
  for (std::size_t i = 0; i < block.timing.size(); ++i)
    block.detection[i] -= block.timing[i];
}

} // namespace chronodrome::conditioning

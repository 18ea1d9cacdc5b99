// Chronodrome, GPL-3.0-or-later.
#include "activation/quality.h"

#include <algorithm>
#include <cmath>

#include "numerics/robust.h"

namespace chronodrome::activation {
namespace {

constexpr Seconds kAgreement{60e-3};

double between_0_and_1(double value) {
  return std::clamp(value, 0.0, 1.0);
}

/// Share of [start, end) that cannot be read; `cursor` moves on with rising windows.
double unreadable_share(const std::vector<Unreadable>& stretches, recording::Span window,
                        std::size_t& cursor) {
  while (cursor < stretches.size() && stretches[cursor].span.end <= window.start)
    ++cursor;
  double lost = 0.0;
  for (std::size_t k = cursor; k < stretches.size() && stretches[k].span.start < window.end; ++k) {
    lost += (std::min(stretches[k].span.end, window.end) - std::max(stretches[k].span.start, window.start))
                .value();
  }
  return between_0_and_1(lost / (window.end - window.start).value());
}

struct BeatsOfWindow {
  std::vector<double> amplitudes;
  double confidence = 0.0;
  double agreeing = 0.0;
};

int index_of(const QualityWindow& window, const BeatsOfWindow& beats, bool has_partner) {
  const double n = static_cast<double>(beats.amplitudes.size());
  const double size = beats.amplitudes.empty() ? 0.0 : numerics::median(beats.amplitudes);
  const double q_snr = between_0_and_1((window.signal_to_noise - 3.0) / 12.0);
  const double q_shape = n > 0.0 ? between_0_and_1(beats.confidence / n) : 0.0;
  double q_hum = window.mains_rms > 0.0 ? 0.0 : 1.0;
  if (size > 0.0) q_hum = between_0_and_1(1.0 - window.mains_rms / (0.125 * size));
  const double q_readable =
      between_0_and_1(1.0 - 5.0 * std::max(window.unreadable_share, window.clipped_share));
  double index = 0.35 * q_snr + 0.25 * q_shape + 0.15 * q_hum + 0.15 * q_readable;
  if (has_partner) {
    index += 0.10 * (n > 0.0 ? beats.agreeing / n : 0.0);
  } else {
    index /= 0.9;
  }
  return static_cast<int>(std::lround(100.0 * between_0_and_1(index)));
}

} // namespace

std::vector<char> agreement(const ChannelActivations& channel,
                            std::span<const ChannelActivations* const> others) {
  std::vector<char> agreeing(channel.marks.size(), 0);
  for (const ChannelActivations* other : others) {
    std::size_t k = 0;
    for (std::size_t i = 0; i < channel.marks.size(); ++i) {
      const Seconds time = channel.marks[i].time;
      while (k < other->marks.size() && other->marks[k].time < time - kAgreement)
        ++k;
      if (k < other->marks.size() && other->marks[k].time <= time + kAgreement) agreeing[i] = 1;
    }
  }
  return agreeing;
}

std::vector<QualityWindow> quality_of(const ChannelScan& scan, const ChannelActivations& channel,
                                      const std::optional<std::vector<char>>& agreeing) {
  std::vector<QualityWindow> windows;
  const double length = kQualityWindow.value();
  const double end = scan.channel->time_base().end().value() + scan.channel->skew.value();
  const auto count = static_cast<std::size_t>(std::ceil(end / length - 1e-9));
  std::size_t noise = 0;
  std::size_t mark = 0;
  std::size_t stretch = 0;
  for (std::size_t w = 0; w < count; ++w) {
    QualityWindow window;
    window.span = {Seconds(static_cast<double>(w) * length),
                   Seconds(std::min(end, static_cast<double>(w + 1) * length))};
    while (noise < scan.noise.size() && scan.noise[noise].window < w)
      ++noise;
    double samples = 0.0;
    // Two runs can meet in one window.
    for (; noise < scan.noise.size() && scan.noise[noise].window == w; ++noise) {
      const WindowNoise& part = scan.noise[noise];
      window.noise_sd = std::max(window.noise_sd, part.noise_sd);
      window.mains_rms += part.mains_power;
      window.clipped_share += part.clipped;
      samples += part.samples;
    }
    if (samples > 0.0) {
      window.mains_rms = std::sqrt(window.mains_rms / samples);
      window.clipped_share /= samples;
    }
    window.unreadable_share = unreadable_share(channel.unreadable, window.span, stretch);
    BeatsOfWindow beats;
    for (; mark < channel.marks.size() && channel.marks[mark].time < window.span.end; ++mark) {
      beats.amplitudes.push_back(channel.marks[mark].amplitude);
      beats.confidence += channel.marks[mark].confidence;
      if (agreeing && (*agreeing)[mark] != 0) beats.agreeing += 1.0;
    }
    if (!beats.amplitudes.empty()) {
      // Without any noise the ratio is held at what a 16-bit converter could show.
      const double size = numerics::median(beats.amplitudes);
      window.signal_to_noise = size / std::max(2.0 * window.noise_sd, size / 65536.0);
    }
    window.index = index_of(window, beats, agreeing.has_value());
    windows.push_back(window);
  }
  return windows;
}

} // namespace chronodrome::activation

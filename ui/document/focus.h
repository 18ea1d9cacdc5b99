// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include <QObject>

#include "base/quantity.h"

namespace chronodrome::ui {

/// A step of a curve, as a response row names it.
struct StepRef {
  int curve = 0;
  Molar concentration;
  std::string measure; ///< `rate:RA`; empty: all measures
  bool operator==(const StepRef&) const = default;
};

/// What the user looks at: the one thing that the panes share. Panes know the focus and the document, never
/// each other.
class Focus : public QObject {
  Q_OBJECT
public:
  explicit Focus(QObject* parent = nullptr) : QObject(parent) {}

  /// The stretch of time that the evidence shows.
  [[nodiscard]] Seconds start() const { return start_; }
  [[nodiscard]] Seconds end() const { return end_; }
  [[nodiscard]] Seconds recordingEnd() const { return recording_end_; }
  [[nodiscard]] std::optional<StepRef> step() const { return step_; }
  [[nodiscard]] int curve() const { return curve_; }                    ///< that the answer shows; 0: none
  [[nodiscard]] const std::string& measure() const { return measure_; } ///< that the answer shows
  [[nodiscard]] bool canGoBack() const { return place_ > 0; }
  [[nodiscard]] bool canGoForward() const { return place_ + 1 < places_.size(); }

public Q_SLOTS:
  /// Forgets all and shows the whole of a recording of this length.
  void reset(chronodrome::Seconds recordingEnd);
  /// Shows the stretch, moved and cut so that it lies in the recording; at least 1 ms. No place is
  /// remembered: for zooming and panning.
  void show(chronodrome::Seconds start, chronodrome::Seconds end);
  /// As show(), and remembers where the user was: for jumps.
  void goTo(chronodrome::Seconds start, chronodrome::Seconds end);
  /// Jumps so that `time` stands in the middle, at the present width.
  void goToTime(chronodrome::Seconds time);
  void goBack();
  void goForward();
  /// A step is chosen: story marks its plateau, answer its point. Nothing: none is.
  void chooseStep(std::optional<chronodrome::ui::StepRef> step);
  /// The curve and measure that the answer shows.
  void chooseCurve(int curve, const std::string& measure);

Q_SIGNALS:
  void rangeChanged(chronodrome::Seconds start, chronodrome::Seconds end);
  void stepChanged();
  void curveChanged();
  void placesChanged();

private:
  struct Stretch {
    Seconds start, end;
  };
  void set(Seconds start, Seconds end);

  Seconds start_, end_, recording_end_;
  std::optional<StepRef> step_;
  int curve_ = 0;
  std::string measure_;
  std::vector<Stretch> places_;
  std::size_t place_ = 0;
};

} // namespace chronodrome::ui

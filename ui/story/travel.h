// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <optional>

#include "ui/document/focus.h"
#include "ui/story/story_figure.h"

namespace chronodrome::ui::story {

/// Going somewhere in the story: what a click or a key does to the focus.
class Travel {
public:
  Travel(StoryFigure& figure, Focus& focus) : figure_(figure), focus_(focus) {}

  /// A click: a plateau is chosen and shown, an episode shown; everything else is brought to the middle.
  void follow(const Hit& hit);
  /// At the present width; from the whole recording at a width in which beats can be seen.
  void toTime(Seconds time);
  void choosePlateau(std::size_t response);
  /// Next (1) or previous (-1) plateau of the measure that is looked at.
  void toPlateau(int direction);
  /// Next or previous event of the drug log that changed the bath.
  void toAddition(int direction);
  /// Moves the frame by a share of its width.
  void pan(double share);
  void toEnd(bool isLast);
  /// Narrows (below 1) or widens the frame about its middle.
  void zoom(double factor);

  /// The response that the chosen step names, among those of the figure; nothing: none is chosen.
  [[nodiscard]] std::optional<std::size_t> chosen() const;

private:
  /// Shows the rhythm block at a time; false: it is regular, or too long to be shown whole.
  bool toEpisode(Seconds time);
  [[nodiscard]] std::string measure() const;

  StoryFigure& figure_;
  Focus& focus_;
};

} // namespace chronodrome::ui::story

// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include <cstddef>
#include <memory>
#include <optional>
#include <vector>

#include "session/rhythm_blocks.h"
#include "ui/story/figure_part.h"
#include "ui/story/touch_layer.h"

namespace chronodrome::ui::story {

class BathRibbon;
class LostStretches;
class PlateauBands;
class RhythmStrip;

/// What lies under a place of the figure.
struct Hit {
  enum class Part {
    nothing,
    gutter,
    frameTab,
    frameStart,
    frameEnd,
    frameBody,
    bandStart,
    bandEnd,
    band,
    bath,
    row,
    rhythm
  };
  Part part = Part::nothing;
  Part area = Part::nothing; ///< bath, row or rhythm that lies there, whatever lies over it
  Seconds time;
  std::size_t trend = 0;    ///< row: index of its trend
  std::size_t response = 0; ///< bands: index into the responses of `bands`
};

/// The story as a figure in a plot: bath ribbon, one row a measure, rhythm strip, all over one time axis with
/// aligned margins. It draws and says what lies where; it changes nothing.
class StoryFigure {
public:
  /// Takes over the plot: its layout and layers. The plot must outlive the figure's use.
  explicit StoryFigure(QCustomPlot& plot);
  StoryFigure(const StoryFigure&) = delete;
  StoryFigure& operator=(const StoryFigure&) = delete;

  void setTheme(const look::Theme& theme);
  void setContent(std::shared_ptr<const StoryContent> content);
  /// Draws the plateaus of this result instead (a preview); null: the content's own.
  void setBands(std::shared_ptr<const session::SessionResult> result);
  void setChosen(std::optional<StepRef> step);
  void setStale(bool isStale);
  /// Time that the story shows; cut to the recording, at least 1 s.
  void setView(Seconds start, Seconds end);
  /// Which rows are shown, where there is no room for all.
  void setRows(std::size_t first, std::size_t count);

  [[nodiscard]] const FigureState& state() const { return state_; }
  /// To be changed at will; replotTouch() shows it.
  [[nodiscard]] TouchState& touch() { return touch_; }
  [[nodiscard]] recording::Span view() const { return view_; }
  [[nodiscard]] bool isWhole() const;
  [[nodiscard]] std::size_t rowCount() const; ///< of all measures
  [[nodiscard]] std::size_t firstRow() const { return first_row_; }
  /// Rows of at least kLeastRow pixels that a figure of this height has room for.
  [[nodiscard]] std::size_t rowsFor(int height) const;

  [[nodiscard]] Hit hitAt(QPointF place) const;
  [[nodiscard]] Seconds timeAt(double x) const;
  [[nodiscard]] double xOf(Seconds time) const;
  [[nodiscard]] QRect rowRect(std::size_t trend) const; ///< empty: not shown
  [[nodiscard]] QRect bathRect() const;
  [[nodiscard]] QRect rhythmRect() const;
  [[nodiscard]] QRectF bandRect(std::size_t response) const;
  /// What is hatched at that time, or null. Nothing for `trend`: what is lost of all channels.
  [[nodiscard]] const session::LostStretch* lostAt(std::optional<std::size_t> trend, Seconds time) const;
  /// Index of the lane of the bath at a height, -1: none.
  [[nodiscard]] int laneAt(double y) const;
  [[nodiscard]] const session::RhythmBlock* blockAt(double x) const;

  /// Numbers at the axes for the size that the plot has now; a replot does it by itself.
  void fitTicks();
  /// Everything, once the event loop is reached again.
  void replot();
  /// The frame and what moves with the pointer: quick.
  void replotTouch();

  static constexpr int kLeastRow = 56;

private:
  struct Row {
    std::size_t trend = 0;
    QPointer<QCPAxisRect> rect;
    PlateauBands* bands = nullptr;
    LostStretches* lost = nullptr;
  };
  void build();
  void clear();
  QCPAxisRect* addRect(int row);
  void addTrendRow(std::size_t trend, int at);
  void addEmptyRow(int at);
  void dressRects();
  void applyView();
  void dressAxes(QCPAxisRect& rect, bool isRow, bool hasTimes) const;
  [[nodiscard]] int fixedHeight() const;
  [[nodiscard]] std::optional<Hit> bandHit(QPointF place, const Row& row) const;
  [[nodiscard]] std::optional<Hit> frameHit(QPointF place) const;
  [[nodiscard]] const Row* rowOf(std::size_t trend) const;
  [[nodiscard]] const Row* rowAt(double y) const;

  QCustomPlot& plot_;
  QObject context_; ///< what is still to come for the figure ends with it
  FigureState state_;
  recording::Span view_{Seconds(0.0), Seconds(1.0)};
  std::size_t first_row_ = 0;
  std::size_t row_limit_ = static_cast<std::size_t>(-1);
  std::vector<Row> rows_;
  std::vector<std::unique_ptr<QCPLayerable>> parts_;
  QPointer<QCPAxisRect> bath_rect_, rhythm_rect_;
  BathRibbon* bath_ = nullptr;
  RhythmStrip* rhythm_ = nullptr;
  LostStretches* lost_ = nullptr;
  TouchLayer* touch_layer_ = nullptr;
  TouchState touch_;
  bool is_touch_due_ = false;
};

} // namespace chronodrome::ui::story

// Chronodrome, GPL-3.0-or-later.
#pragma once

#include "ui/look/custom_plot.h"

#include <functional>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "ui/evidence/frame.h"
#include "ui/evidence/overlay.h"
#include "ui/evidence/scene.h"
#include "ui/look/theme.h"

#include "recording/trace.h"

namespace chronodrome::ui::evidence {

/// The traces of all channels on one time axis, with marks, delays, plateaus and additions. Draws what it is
/// given; knows neither document nor focus. Moving a cursor redraws the cursors alone.
class EvidenceFigure : public QCustomPlot {
  Q_OBJECT
public:
  explicit EvidenceFigure(QWidget* parent = nullptr);

  void setTheme(const look::Theme& theme);
  /// Rows keep their scale as long as a channel of that label is there.
  void setScene(Scene scene);
  void setPending(std::vector<Pending> pending, bool is_stale);
  void setView(Seconds start, Seconds end);
  /// Prepared stretches, found by label; drawn over the raw signal. `mode`: in words, for the corner.
  void setFiltered(std::vector<recording::Channel> filtered, const QString& mode);
  /// More words for the corner: how cursors snap.
  void setNote(const QString& note);
  /// Whose plateaus stand out; nothing: none.
  void setChosenStep(int curve, std::optional<Molar> concentration);

  [[nodiscard]] const Scene& scene() const { return scene_; }
  [[nodiscard]] const std::vector<recording::Channel>& filtered() const { return filtered_; }
  [[nodiscard]] const look::Theme& theme() const { return *theme_; }
  [[nodiscard]] const QString& mode() const { return mode_; }

  // ---- where things are
  [[nodiscard]] TimeFrame timeFrame() const;
  [[nodiscard]] RowFrame rowFrame(int row) const;
  /// Row at a height, axis included; -1: none.
  [[nodiscard]] int rowAt(double y) const;
  [[nodiscard]] bool isOnAxis(const QPointF& at) const; ///< left of the rows
  /// Mark of a row within `reach` pixels of `x`.
  [[nodiscard]] std::optional<std::size_t> markAt(int row, double x, double reach) const;
  /// Marks of the row are far enough apart to be told from each other.
  [[nodiscard]] bool marksAreDistinct(int row) const;

  // ---- amplitude of a row
  void setLocked(int row, bool is_locked);
  [[nodiscard]] bool isLocked(int row) const;
  /// Limits from now on, locked.
  void setLimits(int row, recording::MinMax limits);

  // ---- cursors
  [[nodiscard]] const Overlay& overlay() const { return overlay_; }
  void setOverlay(Overlay overlay);

protected:
  void updateLayout() override;

private:
  struct Row {
    QCPAxisRect* rect = nullptr;
    std::vector<recording::TracePiece> raw, filtered;
    std::optional<recording::MinMax> limits;
    bool is_locked = false;
  };

  void buildRows();
  void sizeStrips();
  void takeTraces();
  void drawGround(QCPPainter& painter);
  void drawTraces(QCPPainter& painter);
  void drawMarksAndDelays(QCPPainter& painter);
  void drawLabels(QCPPainter& painter);
  void drawRowLabel(QCPPainter& painter, int row);
  void drawEvents(QCPPainter& painter, TextRoom& room);
  void drawPlateauTexts(QCPPainter& painter, TextRoom& room);
  void drawFoot(QCPPainter& painter);
  void drawLost(QCPPainter& painter, int row);
  [[nodiscard]] QColor markColor(int row) const; ///< paler while the result is stale
  [[nodiscard]] bool isChosen(const session::PlateauWindow& window) const;
  [[nodiscard]] QRectF bodyRect() const; ///< from the top of the first row to the bottom of the last
  [[nodiscard]] const Row& at(int row) const { return rows_[static_cast<std::size_t>(row)]; }
  [[nodiscard]] Row& at(int row) { return rows_[static_cast<std::size_t>(row)]; }

  const look::Theme* theme_ = &look::Theme::of(look::Mode::light);
  Scene scene_;
  std::vector<Row> rows_;
  std::vector<QCPLayoutElement*> strips_; ///< above each row; the last one below all
  Seconds start_{0.0}, end_{1.0};
  std::vector<recording::Channel> filtered_;
  QString mode_, note_;
  int chosen_curve_ = 0;
  std::optional<Molar> chosen_concentration_;
  Overlay overlay_;
};

} // namespace chronodrome::ui::evidence

// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/evidence_figure.h"

#include <algorithm>
#include <cmath>

#include "ui/evidence/artist.h"
#include "ui/evidence/mark_drawing.h"
#include "ui/look/plot_style.h"

namespace chronodrome::ui::evidence {
namespace {

constexpr int kLeft = 14 * look::kUnit;
constexpr int kRight = 2 * look::kUnit;
constexpr int kTopStrip = 3 * look::kUnit;
constexpr int kFoot = 5 * look::kUnit;

QCPLayoutElement* strip(QCustomPlot* plot) {
  auto* element = new QCPLayoutElement(plot);
  element->setMinimumSize(1, 1);
  return element;
}

void setHeight(QCPLayoutElement* element, int height) {
  element->setMinimumSize(0, height);
  element->setMaximumSize(QWIDGETSIZE_MAX, height);
}

} // namespace

EvidenceFigure::EvidenceFigure(QWidget* parent) : QCustomPlot(parent) {
  setObjectName(QStringLiteral("evidenceFigure"));
  setAccessibleName(QStringLiteral("traces"));
  setFocusPolicy(Qt::StrongFocus);
  setMouseTracking(true);
  setMinimumHeight(15 * look::kUnit);
  for (const char* name : {"ground", "traces", "marks", "labels", "cursors"})
    addLayer(QLatin1String(name));
  layer(QStringLiteral("cursors"))->setMode(QCPLayer::lmBuffered);
  const auto artist = [this](const char* where, void (EvidenceFigure::*paint)(QCPPainter&)) {
    new Artist(this, QLatin1String(where), [this, paint](QCPPainter& painter) {
      if (!rows_.empty()) (this->*paint)(painter);
    });
  };
  moveLayer(layer(QStringLiteral("ground")), layer(QStringLiteral("background")), limAbove);
  artist("ground", &EvidenceFigure::drawGround);
  artist("traces", &EvidenceFigure::drawTraces);
  artist("marks", &EvidenceFigure::drawMarksAndDelays);
  artist("labels", &EvidenceFigure::drawLabels);
  new Artist(this, QStringLiteral("cursors"), [this](QCPPainter& painter) { drawOverlay(painter, *this); });
  plotLayout()->clear();
  plotLayout()->setRowSpacing(0);
  look::dress(*this, *theme_);
}

void EvidenceFigure::setTheme(const look::Theme& theme) {
  theme_ = &theme;
  look::dress(*this, theme);
  for (auto& row : rows_) {
    for (auto* axis : row.rect->axes()) {
      if (axis->axisType() != QCPAxis::atBottom) continue;
      axis->setTickLabelColor(theme.text_quiet);
    }
  }
  replot(rpQueuedReplot);
}

void EvidenceFigure::setScene(Scene scene) {
  std::map<std::string, Row> before;
  for (int row = 0; row < static_cast<int>(rows_.size()) && row < scene_.rows(); ++row)
    before[scene_.channel(row).label] = at(row);
  scene_ = std::move(scene);
  buildRows();
  for (int row = 0; row < scene_.rows(); ++row) {
    const auto known = before.find(scene_.channel(row).label);
    if (known == before.end()) continue;
    at(row).limits = known->second.limits;
    at(row).is_locked = known->second.is_locked;
  }
  replot(rpQueuedReplot);
}

void EvidenceFigure::setPending(std::vector<Pending> pending, bool is_stale) {
  scene_.pending = std::move(pending);
  scene_.is_stale = is_stale;
  replot(rpQueuedReplot);
}

void EvidenceFigure::setView(Seconds start, Seconds end) {
  start_ = start;
  end_ = std::max(end, start + Seconds(1e-4));
  replot(rpQueuedReplot);
}

void EvidenceFigure::setFiltered(std::vector<recording::Channel> filtered, const QString& mode) {
  filtered_ = std::move(filtered);
  mode_ = mode;
  replot(rpQueuedReplot);
}

void EvidenceFigure::setNote(const QString& note) {
  if (note == note_) return;
  note_ = note;
  replot(rpQueuedReplot);
}

void EvidenceFigure::setChosenStep(int curve, std::optional<Molar> concentration) {
  chosen_curve_ = curve;
  chosen_concentration_ = concentration;
  replot(rpQueuedReplot);
}

void EvidenceFigure::buildRows() {
  plotLayout()->clear();
  rows_.clear();
  strips_.clear();
  int line = 0;
  for (int row = 0; row < scene_.rows(); ++row) {
    strips_.push_back(strip(this));
    plotLayout()->addElement(line++, 0, strips_.back());
    auto* rect = new QCPAxisRect(this, false);
    rect->setMinimumMargins(QMargins(0, 0, 0, 0));
    rect->setAutoMargins(QCP::msNone);
    rect->setMargins(QMargins(kLeft, 0, kRight, 0));
    rect->setMinimumSize(0, 0);
    auto* left = rect->addAxis(QCPAxis::atLeft);
    auto* bottom = rect->addAxis(QCPAxis::atBottom);
    left->setTicker(QSharedPointer<look::NumberTicker>::create());
    bottom->setTicker(QSharedPointer<look::TimeTicker>::create());
    left->grid()->setVisible(false);
    bottom->setTickLabels(row + 1 == scene_.rows());
    bottom->setTicks(row + 1 == scene_.rows());
    bottom->setBasePen(Qt::NoPen);
    for (auto* axis : {left, bottom}) {
      axis->setLayer(QStringLiteral("axes"));
      axis->grid()->setLayer(QStringLiteral("grid"));
    }
    plotLayout()->addElement(line++, 0, rect);
    rows_.push_back({rect, {}, {}, {}, false});
  }
  strips_.push_back(strip(this));
  plotLayout()->addElement(line, 0, strips_.back());
  look::dress(*this, *theme_);
  for (const Row& row : rows_)
    row.rect->axis(QCPAxis::atBottom)->setBasePen(look::thinPen(theme_->line));
}

void EvidenceFigure::sizeStrips() {
  const auto rows = static_cast<int>(rows_.size());
  // Room for delays where a pathway begins, as far as the height allows.
  const int each = (viewport().height() - kTopStrip - kFoot) / std::max(rows, 1);
  const int wide = each >= 12 * look::kUnit ? 4 * look::kUnit : each >= 7 * look::kUnit ? 2 * look::kUnit : 8;
  const int narrow = each >= 7 * look::kUnit ? 12 : 6;
  setHeight(strips_.front(), kTopStrip);
  setHeight(strips_.back(), kFoot);
  for (int row = 1; row < rows; ++row) {
    const bool hosts =
        std::any_of(scene_.pathways.begin(), scene_.pathways.end(), [&](const PathwayRows& pathway) {
          return pathway.from >= 0 && pathway.to >= 0 && std::min(pathway.from, pathway.to) == row - 1;
        });
    setHeight(strips_[static_cast<std::size_t>(row)], hosts ? wide : narrow);
  }
}

void EvidenceFigure::updateLayout() {
  if (rows_.empty()) {
    QCustomPlot::updateLayout();
    return;
  }
  sizeStrips();
  QCustomPlot::updateLayout();
  takeTraces();
  for (auto& row : rows_) {
    const int height = row.rect->height();
    row.rect->axis(QCPAxis::atLeft)->ticker()->setTickCount(height > 120 ? 5 : height > 40 ? 3 : 2);
    row.rect->axis(QCPAxis::atBottom)->ticker()->setTickCount(std::max(3, row.rect->width() / 120));
    row.rect->axis(QCPAxis::atBottom)->setRange(start_.value(), end_.value());
    if (row.limits) row.rect->axis(QCPAxis::atLeft)->setRange(row.limits->min, row.limits->max);
    // Ticks follow the limits that this layout gave.
    row.rect->update(QCPLayoutElement::upPreparation);
  }
}

void EvidenceFigure::takeTraces() {
  for (int r = 0; r < static_cast<int>(rows_.size()); ++r) {
    Row& row = at(r);
    const double scale = bufferDevicePixelRatio();
    const auto columns = static_cast<std::size_t>(std::max(1.0, row.rect->width() * scale));
    row.raw = recording::trace_of(scene_.channel(r), start_, end_, columns);
    row.filtered.clear();
    for (const auto& channel : filtered_) {
      if (channel.label == scene_.channel(r).label)
        row.filtered = recording::trace_of(channel, start_, end_, columns);
    }
    if (row.is_locked && row.limits) continue;
    if (const auto range = recording::range_of(row.raw))
      row.limits = recording::settled_limits(*range, row.limits);
  }
}

TimeFrame EvidenceFigure::timeFrame() const {
  if (rows_.empty()) return {start_, end_, 0.0, 1.0};
  const QRect rect = rows_.front().rect->rect();
  return {start_, end_, static_cast<double>(rect.left()), std::max(1.0, static_cast<double>(rect.width()))};
}

RowFrame EvidenceFigure::rowFrame(int row) const {
  const Row& one = at(row);
  return {timeFrame(), QRectF(one.rect->rect()), one.limits.value_or(recording::MinMax{-1.0, 1.0})};
}

int EvidenceFigure::rowAt(double y) const {
  for (int row = 0; row < static_cast<int>(rows_.size()); ++row) {
    // The strip above belongs to its row, for the marks stand there.
    const QRect rect = at(row).rect->rect();
    if (y >= rect.top() - 4 && y <= rect.bottom() + 4) return row;
  }
  return -1;
}

bool EvidenceFigure::isOnAxis(const QPointF& at) const {
  return at.x() < timeFrame().left && rowAt(at.y()) >= 0;
}

std::optional<std::size_t> EvidenceFigure::markAt(int row, double x, double reach) const {
  if (row < 0 || row >= scene_.rows()) return std::nullopt;
  const auto& marks = scene_.marks(row);
  const TimeFrame time = timeFrame();
  std::optional<std::size_t> best;
  double nearest = reach;
  const auto [first, end] = marksWithin(marks, {time.timeOf(x - reach), time.timeOf(x + reach), 0.0, 1.0});
  for (std::size_t i = first; i < end; ++i) {
    const double distance = std::abs(time.xOf(marks[i].time) - x);
    if (distance <= nearest) best = i, nearest = distance;
  }
  return best;
}

bool EvidenceFigure::marksAreDistinct(int row) const {
  return marksApart(scene_.marks(row), timeFrame()) >= kMarksApart;
}

void EvidenceFigure::setLocked(int row, bool is_locked) {
  at(row).is_locked = is_locked;
  if (!is_locked) at(row).limits.reset();
  replot(rpQueuedReplot);
}

bool EvidenceFigure::isLocked(int row) const {
  return at(row).is_locked;
}

void EvidenceFigure::setLimits(int row, recording::MinMax limits) {
  if (!(limits.max > limits.min)) return;
  at(row).limits = limits;
  at(row).is_locked = true;
  replot(rpQueuedReplot);
}

void EvidenceFigure::setOverlay(Overlay overlay) {
  overlay_ = std::move(overlay);
  if (isVisible()) layer(QStringLiteral("cursors"))->replot();
}

} // namespace chronodrome::ui::evidence

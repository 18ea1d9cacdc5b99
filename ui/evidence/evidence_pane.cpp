// Chronodrome, GPL-3.0-or-later.
#include "ui/evidence/evidence_pane.h"

#include <algorithm>
#include <array>
#include <cmath>

#include <QAction>
#include <QKeyEvent>
#include <QLabel>
#include <QStackedWidget>
#include <QVBoxLayout>

#include "conditioning/stretch.h"
#include "session/cursor.h"
#include "session/stretches.h"
#include "ui/evidence/words.h"

namespace chronodrome::ui::evidence {

EvidencePane::EvidencePane(SessionDocument& document, Focus& focus, QWidget* parent)
    : QWidget(parent), document_(document), focus_(focus) {
  setObjectName(QStringLiteral("evidencePane"));
  setAccessibleName(QStringLiteral("evidence: traces and marks"));
  layOut();
  addActions();
  connectParts();
  setTheme(*theme_);
  takeDocument();
}

void EvidencePane::layOut() {
  figure_ = new EvidenceFigure(this);
  pointer_ = new Pointer(*figure_);
  empty_ = new QLabel(this);
  empty_->setObjectName(QStringLiteral("emptyEvidenceLabel"));
  empty_->setAlignment(Qt::AlignCenter);
  empty_->setWordWrap(true);
  empty_->setAutoFillBackground(true);
  pages_ = new QStackedWidget(this);
  pages_->addWidget(empty_);
  pages_->addWidget(figure_);
  bar_ = new InlineBar(this);
  strip_ = new ReadOutStrip(this);
  work_ = new FilteredWork(this);
  auto* lines = new QVBoxLayout(this);
  lines->setContentsMargins(0, 0, 0, 0);
  lines->setSpacing(0);
  lines->addWidget(pages_, 1);
  lines->addWidget(bar_);
  lines->addWidget(strip_);
  setFocusProxy(figure_);
  figure_->installEventFilter(this);
}

void EvidencePane::connectParts() {
  connect(&document_, &SessionDocument::opened, this, &EvidencePane::takeDocument);
  connect(&document_, &SessionDocument::closed, this, &EvidencePane::takeDocument);
  connect(&document_, &SessionDocument::resultChanged, this, &EvidencePane::takeDocument);
  connect(&document_, &SessionDocument::edited, this, &EvidencePane::takePending);
  connect(&document_, &SessionDocument::staleChanged, this, &EvidencePane::takePending);
  connect(&document_, &SessionDocument::workChanged, this, &EvidencePane::showEmptyText);
  connect(&focus_, &Focus::rangeChanged, this, &EvidencePane::showRange);
  connect(&focus_, &Focus::stepChanged, this, &EvidencePane::showStep);
  connect(&focus_, &Focus::placesChanged, this, &EvidencePane::updateActions);
  connect(work_, &FilteredWork::done, this, &EvidencePane::showFiltered);
  connect(bar_, &InlineBar::dismissed, figure_, [this] { figure_->setFocus(Qt::OtherFocusReason); });

  connect(pointer_, &Pointer::pointed, this, &EvidencePane::point);
  connect(pointer_, &Pointer::left, this, &EvidencePane::leave);
  connect(pointer_, &Pointer::zoomed, this, [this](double factor, double x) { zoom(factor, x); });
  connect(pointer_, &Pointer::panned, this,
          [this](double pixels) { panBy(-pixels / figure_->timeFrame().width); });
  connect(pointer_, &Pointer::clicked, this, [this](int row, double x) {
    chosen_.reset();
    selection_.reset();
    setActiveRow(row);
    pinSecond(snappedAt(active_row_, x, cursors_.snap));
  });
  connect(pointer_, &Pointer::markChosen, this, &EvidencePane::choose);
  connect(pointer_, &Pointer::markDragged, this, &EvidencePane::dragMark);
  connect(pointer_, &Pointer::markDropped, this, &EvidencePane::dropMark);
  connect(pointer_, &Pointer::aborted, this, [this] {
    move_.reset();
    showOverlay();
  });
  connect(pointer_, &Pointer::rowDoubleClicked, this, [this](int row, double x) {
    addMark(row, snappedAt(row, x, cursors_.snap == Snap::off ? Snap::off : Snap::samples));
  });
  connect(pointer_, &Pointer::stretchDragged, this, &EvidencePane::selectStretch);
  connect(pointer_, &Pointer::axisDragged, this, [this](int row, double pixels) {
    const RowFrame frame = figure_->rowFrame(row);
    const double factor = std::pow(2.0, -pixels / 100.0);
    const double centre = 0.5 * (frame.limits.min + frame.limits.max);
    const double half = 0.5 * (frame.limits.max - frame.limits.min) * factor;
    figure_->setLimits(row, {centre - half, centre + half});
  });
  connect(pointer_, &Pointer::axisZoomed, this, [this](int row, double factor, double y) {
    const RowFrame frame = figure_->rowFrame(row);
    const double at = frame.valueOf(y);
    figure_->setLimits(row, {at + (frame.limits.min - at) * factor, at + (frame.limits.max - at) * factor});
  });
  connect(pointer_, &Pointer::axisDoubleClicked, this, [this](int row) { figure_->setLocked(row, false); });
}

void EvidencePane::setTheme(const look::Theme& theme) {
  theme_ = &theme;
  figure_->setTheme(theme);
  strip_->setTheme(theme);
  QPalette palette = empty_->palette();
  palette.setColor(QPalette::Window, theme.surface);
  palette.setColor(QPalette::WindowText, theme.text_quiet);
  empty_->setPalette(palette);
}

void EvidencePane::takeDocument() {
  const auto recording = document_.recording();
  auto result = document_.result();
  if (!recording) {
    figure_->setScene({});
    cursors_ = {std::nullopt, std::nullopt, false, Cursors::Which::second, cursors_.snap};
    chosen_.reset();
    selection_.reset();
    place_.reset();
    work_->setChannels({}, {});
    strip_->show({});
    bar_->dismiss();
  } else {
    const bool is_analysed = result != nullptr;
    if (!is_analysed) result = std::make_shared<const session::SessionResult>(session::unanalysed(recording));
    const auto inputs = document_.inputs();
    work_->setChannels(is_analysed ? result->channels : std::vector<recording::Channel>{},
                       inputs ? inputs->settings.activation.conditioning
                              : conditioning::ConditioningSettings{});
    Scene scene = sceneOf(std::move(result));
    scene.pending = pendingOf(scene, document_.session().review);
    scene.is_stale = is_analysed && document_.isStale();
    figure_->setScene(std::move(scene));
    active_row_ = std::clamp(active_row_, 0, std::max(0, figure_->scene().rows() - 1));
  }
  pages_->setCurrentIndex(recording ? 1 : 0);
  strip_->setVisible(recording != nullptr);
  showEmptyText();
  showRange();
  showStep();
  updateActions();
}

void EvidencePane::takePending() {
  if (figure_->scene().rows() == 0) return;
  figure_->setPending(pendingOf(figure_->scene(), document_.session().review),
                      document_.result() != nullptr && document_.isStale());
}

void EvidencePane::showRange() {
  figure_->setView(focus_.start(), focus_.end());
  showFiltered();
  showOverlay();
}

void EvidencePane::showFiltered() {
  const bool is_analysed = document_.result() != nullptr;
  if (!is_filtered_ || !is_analysed) {
    figure_->setFiltered({}, QStringLiteral("raw"));
    return;
  }
  if (focus_.end() - focus_.start() > conditioning::kLongestStretch) {
    figure_->setFiltered({}, QStringLiteral("raw; filtered below 60 s"));
    return;
  }
  work_->want(focus_.start(), focus_.end());
  // What is there already is shown while the rest is on its way.
  const bool is_ready = work_->covers(focus_.start(), focus_.end());
  figure_->setFiltered(work_->stretches(),
                       is_ready ? QStringLiteral("filtered over raw") : QStringLiteral("filtering"));
  showOverlay();
}

void EvidencePane::showStep() {
  const auto step = focus_.step();
  figure_->setChosenStep(step ? step->curve : 0, step ? std::optional(step->concentration) : std::nullopt);
}

void EvidencePane::showEmptyText() {
  if (document_.recording()) return;
  empty_->setText(document_.work() == SessionDocument::Work::reading
                      ? document_.workText()
                      : QStringLiteral("No recording is open.\nTake a recording in, or open a session: its "
                                       "traces and marks stand here."));
}

void EvidencePane::showOverlay() {
  Overlay overlay;
  overlay.reference = cursors_.reference;
  overlay.second = cursors_.second;
  overlay.is_pinned = cursors_.is_pinned;
  overlay.active_row = active_row_;
  overlay.chosen = chosen_;
  overlay.move = move_;
  overlay.selection = selection_;
  figure_->setOverlay(overlay);
  figure_->setNote(snapText(cursors_.snap));
  delete_action_->setEnabled(chosen_.has_value());
  const Scene& scene = figure_->scene();
  if (!scene.result) return;
  const auto reading = [&](const std::optional<Seconds>& time) -> std::optional<session::CursorReading> {
    if (!time) return std::nullopt;
    return session::read_cursor(*scene.result, scene.bath, figure_->filtered(), *time);
  };
  strip_->show(readOutOf(reading(cursors_.reference), reading(cursors_.second)));
}

bool EvidencePane::eventFilter(QObject* watched, QEvent* event) {
  // With a mark chosen, Tab goes from mark to mark; Escape gives it back to the window.
  if (watched == figure_ && event->type() == QEvent::KeyPress && chosen_) {
    const int key = static_cast<QKeyEvent*>(event)->key();
    if (key == Qt::Key_Tab || key == Qt::Key_Backtab) {
      chooseNeighbour(key == Qt::Key_Tab ? 1 : -1);
      return true;
    }
  }
  return QWidget::eventFilter(watched, event);
}

void EvidencePane::keyPressEvent(QKeyEvent* event) {
  if (event->key() == Qt::Key_Escape) {
    escape();
    return;
  }
  QWidget::keyPressEvent(event);
}

} // namespace chronodrome::ui::evidence

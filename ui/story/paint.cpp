// Chronodrome, GPL-3.0-or-later.
#include "ui/story/paint.h"

#include "ui/story/story_figure.h"

namespace chronodrome::ui::story {

void paintStory(QCPPainter& painter, QSize size, const session::SessionResult& result,
                const look::Theme& theme) {
  QCustomPlot plot;
  plot.setViewport(QRect(QPoint(0, 0), size));
  StoryFigure figure(plot);
  figure.setTheme(theme);
  // Borrowed: everything that is drawn here is gone before the caller's result.
  figure.setContent(contentOf({std::shared_ptr<const session::SessionResult>(), &result}));
  figure.fitTicks();
  plot.setBackground(QBrush(Qt::NoBrush));
  plot.toPainter(&painter, size.width(), size.height());
}

} // namespace chronodrome::ui::story

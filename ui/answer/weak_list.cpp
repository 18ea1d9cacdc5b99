// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/weak_list.h"

#include <algorithm>

#include <QLabel>
#include <QResizeEvent>
#include <QScrollArea>
#include <QVBoxLayout>

#include "ui/answer/words.h"

namespace chronodrome::ui::answer {
namespace {

constexpr int kMostHeight = 26 * look::kUnit;
constexpr int kLeastHeight = 11 * look::kUnit;

QString escaped(const std::string& words) {
  return QString::fromStdString(words).toHtmlEscaped();
}

QString placeText(const session::CurvePlace& place) {
  return place.concentration ? stepText(*place.concentration) : QStringLiteral("the whole curve");
}

} // namespace

WeakList::WeakList(QWidget* parent) : QFrame(parent), heading_(new QLabel(this)), lines_(new QLabel) {
  heading_->setObjectName(QStringLiteral("weakHeadingLabel"));
  lines_->setObjectName(QStringLiteral("weakPointsLabel"));
  lines_->setAccessibleName(tr("What weakens this number"));
  lines_->setWordWrap(true);
  lines_->setTextFormat(Qt::RichText);
  lines_->setAlignment(Qt::AlignTop | Qt::AlignLeft);
  lines_->setTextInteractionFlags(Qt::LinksAccessibleByMouse | Qt::LinksAccessibleByKeyboard);
  auto* scroll = new QScrollArea(this);
  scroll->setObjectName(QStringLiteral("weakScrollArea"));
  scroll->setFrameShape(QFrame::NoFrame);
  scroll->setWidgetResizable(true);
  scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  scroll->setFocusPolicy(Qt::NoFocus);
  scroll->setWidget(lines_);
  scroll->viewport()->setAutoFillBackground(false);
  lines_->setAutoFillBackground(false);
  setSizePolicy(QSizePolicy::Preferred, QSizePolicy::Maximum);
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(look::kUnit / 2);
  column->addWidget(heading_);
  column->addWidget(scroll, 1);
  connect(lines_, &QLabel::linkActivated, this, &WeakList::follow);
}

void WeakList::setTheme(const look::Theme& theme) {
  theme_ = theme;
  heading_->setFont(theme.font(look::TextSize::normal, true));
  lines_->setFont(theme.font(look::TextSize::normal));
  QPalette colors = theme.palette();
  lines_->setPalette(colors);
  write();
}

QSize WeakList::sizeHint() const {
  // A long list scrolls: it must not take the figure's place.
  const int lines = points_.empty() ? 0 : lines_->heightForWidth(std::max(1, width() - 2 * look::kUnit));
  return {40 * look::kUnit, heading_->sizeHint().height() + look::kUnit + std::min(lines, kMostHeight)};
}

void WeakList::resizeEvent(QResizeEvent* event) {
  QFrame::resizeEvent(event);
  if (event->oldSize().width() != event->size().width()) updateGeometry();
}

void WeakList::setPoints(const std::vector<session::WeakPoint>& points) {
  points_ = points;
  write();
}

void WeakList::write() {
  heading_->setText(points_.empty() ? tr("Nothing found that weakens this number")
                                    : tr("What weakens this number"));
  QStringList lines;
  for (std::size_t i = 0; i < points_.size(); ++i) {
    const session::WeakPoint& point = points_[i];
    QStringList links;
    for (std::size_t k = 0; k < point.places.size(); ++k)
      links << QStringLiteral("<a href=\"%1/%2\" style=\"color:%3\">%4</a>")
                   .arg(i)
                   .arg(k)
                   .arg(theme_.accent.name(), placeText(point.places[k]).toHtmlEscaped());
    const QString where = links.join(QStringLiteral(", "));
    QString line;
    if (point.flag.empty()) {
      line = where + QStringLiteral(": ") + escaped(point.what);
    } else {
      // The mark says "caution" without its colour.
      line = QStringLiteral("<span style=\"color:%1\"><b>!</b></span> %2 (%3)")
                 .arg(theme_.caution.name(), escaped(point.what), where);
      if (!point.advice.empty())
        line += QStringLiteral("<br><span style=\"color:%1\">%2</span>")
                    .arg(theme_.text_quiet.name(), escaped(point.advice));
    }
    lines << QStringLiteral("<p style=\"margin-top:0px; margin-bottom:%1px\"%3>%2</p>")
                 .arg(look::kUnit / 2)
                 .arg(line, QString());
  }
  lines_->setText(lines.join(QString()));
  lines_->parentWidget()->parentWidget()->setVisible(!points_.empty());
  setMinimumHeight(points_.empty() ? heading_->sizeHint().height() : kLeastHeight);
  updateGeometry();
  lines_->setFocusPolicy(points_.empty() ? Qt::NoFocus : Qt::StrongFocus);
}

void WeakList::follow(const QString& link) {
  const QStringList parts = link.split(QLatin1Char('/'));
  if (parts.size() != 2) return;
  const auto point = parts.at(0).toULongLong(), place = parts.at(1).toULongLong();
  if (point >= points_.size() || place >= points_[point].places.size()) return;
  Q_EMIT placeChosen(points_[point].places[place]);
}

} // namespace chronodrome::ui::answer

// Chronodrome, GPL-3.0-or-later.
#include "ui/report/svg_device.h"

#include <cmath>
#include <optional>

#include <QPaintEngine>
#include <QPainterPath>
#include <QPen>
#include <QTextItem>

#include "base/number_text.h"

namespace chronodrome::ui::report {
namespace {

constexpr double kDotsPerInch = 96.0;

/// A hundredth of a pixel is finer than any print.
QString number(double value) {
  return QString::fromStdString(chronodrome::number_text(std::round(value * 100.0) / 100.0, 7));
}

QString pathText(const QPainterPath& path) {
  QString text;
  for (int i = 0; i < path.elementCount(); ++i) {
    const auto element = path.elementAt(i);
    if (element.isMoveTo()) text += QLatin1Char('M');
    if (element.isLineTo()) text += QLatin1Char('L');
    if (element.isCurveTo()) text += QLatin1Char('C');
    // The two points behind a curve's first carry no letter of their own.
    if (element.type == QPainterPath::CurveToDataElement) text += QLatin1Char(' ');
    text += number(element.x) + QLatin1Char(' ') + number(element.y);
  }
  return text;
}

QString paintText(const char* what, const QColor& color, double opacity) {
  QString text = QStringLiteral(" %1=\"%2\"").arg(QLatin1String(what), color.name());
  const double visible = color.alphaF() * opacity;
  if (visible < 0.999) text += QStringLiteral(" %1-opacity=\"%2\"").arg(QLatin1String(what), number(visible));
  return text;
}

QString dashText(const QPen& pen, double width) {
  QString text;
  for (const double dash : pen.dashPattern())
    text += (text.isEmpty() ? QString() : QStringLiteral(" ")) + number(dash * width);
  return text;
}

} // namespace

class SvgDevice::Engine : public QPaintEngine {
public:
  Engine() : QPaintEngine(AllFeatures) {}

  bool begin(QPaintDevice*) override { return true; }
  bool end() override {
    closeClip();
    return true;
  }
  [[nodiscard]] Type type() const override { return User; }

  void updateState(const QPaintEngineState& now) override {
    const auto dirty = now.state();
    if (dirty & DirtyTransform) transform_ = now.transform();
    if (dirty & DirtyPen) pen_ = now.pen();
    if (dirty & DirtyBrush) brush_ = now.brush();
    if (dirty & DirtyOpacity) opacity_ = now.opacity();
    if (dirty & DirtyClipRegion)
      setClip(transform_.mapRect(QRectF(now.clipRegion().boundingRect())), now.clipOperation());
    if (dirty & DirtyClipPath) setClip(transform_.map(now.clipPath()).boundingRect(), now.clipOperation());
    if ((dirty & DirtyClipEnabled) && !now.isClipEnabled()) clip_.reset();
  }

  void drawPath(const QPainterPath& path) override { addPath(path, true); }
  void drawPolygon(const QPointF* points, int count, PolygonDrawMode mode) override {
    if (count < 1) return;
    QPainterPath path(points[0]);
    for (int i = 1; i < count; ++i)
      path.lineTo(points[i]);
    if (mode != PolylineMode) path.closeSubpath();
    addPath(path, mode != PolylineMode);
  }
  void drawPixmap(const QRectF&, const QPixmap&, const QRectF&) override {} // figures are vectors

  void drawTextItem(const QPointF& at, const QTextItem& item) override {
    openClip();
    const QFont font = item.font();
    const double size = font.pixelSize() > 0 ? font.pixelSize() : font.pointSizeF() * kDotsPerInch / 72.0;
    const QPointF place = transform_.map(at);
    QString where = QStringLiteral(" x=\"%1\" y=\"%2\"").arg(number(place.x()), number(place.y()));
    if (transform_.m12() != 0.0 || transform_.m21() != 0.0) {
      where = QStringLiteral(" transform=\"matrix(%1 %2 %3 %4 %5 %6)\"")
                  .arg(number(transform_.m11()), number(transform_.m12()), number(transform_.m21()),
                       number(transform_.m22()), number(place.x()), number(place.y()));
    }
    text_ +=
        QStringLiteral("<text") + where + QStringLiteral(" font-size=\"") + number(size) + QLatin1Char('"');
    if (font.bold()) text_ += QStringLiteral(" font-weight=\"bold\"");
    if (font.italic()) text_ += QStringLiteral(" font-style=\"italic\"");
    text_ += paintText("fill", pen_.color(), opacity_) + QLatin1Char('>') + item.text().toHtmlEscaped() +
             QStringLiteral("</text>\n");
  }

  [[nodiscard]] const QString& text() const { return text_; }

private:
  void setClip(const QRectF& rect, Qt::ClipOperation operation) {
    if (operation == Qt::NoClip) {
      clip_.reset();
    } else if (operation == Qt::IntersectClip && clip_) {
      clip_ = clip_->intersected(rect);
    } else {
      clip_ = rect;
    }
  }

  /// Elements under one clip stand in an <svg> of their own, which cuts at its borders and needs no name.
  void openClip() {
    if (clip_ == open_) return;
    closeClip();
    open_ = clip_;
    if (!open_) return;
    const QString x = number(open_->x());
    const QString y = number(open_->y());
    const QString width = number(std::max(open_->width(), 0.01));
    const QString height = number(std::max(open_->height(), 0.01));
    text_ += QStringLiteral("<svg x=\"%1\" y=\"%2\" width=\"%3\" height=\"%4\" viewBox=\"%1 %2 %3 %4\">\n")
                 .arg(x, y, width, height);
  }
  void closeClip() {
    if (open_) text_ += QStringLiteral("</svg>\n");
    open_.reset();
  }

  void addPath(const QPainterPath& path, bool is_filled) {
    const bool fills = is_filled && brush_.style() != Qt::NoBrush && brush_.color().alpha() > 0;
    const bool strokes = pen_.style() != Qt::NoPen && pen_.color().alpha() > 0;
    if ((!fills && !strokes) || path.isEmpty()) return;
    openClip();
    text_ += QStringLiteral("<path d=\"") + pathText(transform_.map(path)) + QLatin1Char('"');
    text_ += fills ? paintText("fill", brush_.color(), opacity_) : QStringLiteral(" fill=\"none\"");
    if (fills && path.fillRule() == Qt::OddEvenFill) text_ += QStringLiteral(" fill-rule=\"evenodd\"");
    if (strokes) addStroke();
    text_ += QStringLiteral("/>\n");
  }

  void addStroke() {
    const double scale = pen_.isCosmetic() ? 1.0 : std::sqrt(std::abs(transform_.determinant()));
    const double width = pen_.widthF() > 0.0 ? pen_.widthF() * scale : 1.0;
    text_ += paintText("stroke", pen_.color(), opacity_);
    if (width != 1.0) text_ += QStringLiteral(" stroke-width=\"") + number(width) + QLatin1Char('"');
    if (pen_.style() != Qt::SolidLine)
      text_ += QStringLiteral(" stroke-dasharray=\"") + dashText(pen_, width) + QLatin1Char('"');
    if (pen_.capStyle() == Qt::RoundCap) text_ += QStringLiteral(" stroke-linecap=\"round\"");
    if (pen_.joinStyle() != Qt::MiterJoin)
      text_ += QStringLiteral(" stroke-linejoin=\"") +
               QLatin1String(pen_.joinStyle() == Qt::RoundJoin ? "round" : "bevel") + QLatin1Char('"');
  }

  QTransform transform_;
  QPen pen_;
  QBrush brush_;
  double opacity_ = 1.0;
  std::optional<QRectF> clip_, open_;
  QString text_;
};

SvgDevice::SvgDevice(QSize size) : size_(size), engine_(std::make_unique<Engine>()) {}
SvgDevice::~SvgDevice() = default;

QPaintEngine* SvgDevice::paintEngine() const {
  return engine_.get();
}

QString SvgDevice::content() const {
  return engine_->text();
}

int SvgDevice::metric(PaintDeviceMetric metric) const {
  switch (metric) {
  case PdmWidth:
    return size_.width();
  case PdmHeight:
    return size_.height();
  case PdmWidthMM:
    return qRound(size_.width() * 25.4 / kDotsPerInch);
  case PdmHeightMM:
    return qRound(size_.height() * 25.4 / kDotsPerInch);
  case PdmDpiX:
  case PdmDpiY:
  case PdmPhysicalDpiX:
  case PdmPhysicalDpiY:
    return static_cast<int>(kDotsPerInch);
  case PdmDepth:
    return 32;
  case PdmNumColors:
    return 1 << 24;
  case PdmDevicePixelRatio:
    return 1;
  case PdmDevicePixelRatioScaled:
    return static_cast<int>(devicePixelRatioFScale());
  }
  return 0;
}

} // namespace chronodrome::ui::report

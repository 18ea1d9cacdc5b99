// Chronodrome, GPL-3.0-or-later.
#include "ui/answer/paint.h"

#include "ui/answer/export_curve.h"

#include <QBuffer>
#include <QImage>
#include <QPdfWriter>
#ifdef QT_SVG_LIB
#include <QSvgGenerator>
#endif

#include "results/output_folder.h"
#include "results/tables.h"

namespace chronodrome::ui::answer {
namespace {

constexpr double kInch = 25.4;         // mm
constexpr double kPixelsAnInch = 96.0; // of the type sizes in ui/look
constexpr int kDotsAnInch = 600;
constexpr double kAspect = 0.8; // height to width; two columns are flatter
constexpr double kWideAspect = 0.5;

QSizeF sizeInMm(int width) {
  return {static_cast<double>(width), width * (width > 120 ? kWideAspect : kAspect)};
}

QSize inPixels(const QSizeF& mm) {
  return (mm * kPixelsAnInch / kInch).toSize();
}

void paint(QCPPainter& painter, const ExportedCurve& curve, const QSizeF& mm) {
  paintCurve(painter, inPixels(mm), *curve.result, curve.curve, curve.measure,
             look::Theme::of(look::Mode::paper), curve.form);
}

void writePdf(QIODevice& device, const ExportedCurve& curve, const QSizeF& mm) {
  QPdfWriter writer(&device);
  writer.setPageSize(QPageSize(mm, QPageSize::Millimeter));
  writer.setPageMargins(QMarginsF());
  writer.setResolution(kDotsAnInch);
  writer.setCreator(QStringLiteral("Chronodrome"));
  writer.setTitle(QString::fromStdString(curve.measure));
  QCPPainter painter(&writer);
  painter.scale(kDotsAnInch / kPixelsAnInch, kDotsAnInch / kPixelsAnInch);
  paint(painter, curve, mm);
}

void writePng(QIODevice& device, const ExportedCurve& curve, const QSizeF& mm) {
  const double scale = kDotsAnInch / kPixelsAnInch;
  QImage image(inPixels(mm) * scale, QImage::Format_RGB32);
  image.fill(look::Theme::of(look::Mode::paper).surface);
  const int dots_a_metre = static_cast<int>(kDotsAnInch / kInch * 1000.0 + 0.5);
  image.setDotsPerMeterX(dots_a_metre);
  image.setDotsPerMeterY(dots_a_metre);
  {
    QCPPainter painter(&image);
    painter.setRenderHint(QPainter::TextAntialiasing);
    painter.scale(scale, scale);
    paint(painter, curve, mm);
  }
  image.save(&device, "PNG");
}

void writeSvg([[maybe_unused]] QIODevice& device, [[maybe_unused]] const ExportedCurve& curve,
              [[maybe_unused]] const QSizeF& mm) {
#ifdef QT_SVG_LIB
  QSvgGenerator generator;
  generator.setOutputDevice(&device);
  generator.setSize(inPixels(mm));
  generator.setViewBox(QRect(QPoint(), inPixels(mm)));
  generator.setResolution(static_cast<int>(kPixelsAnInch));
  generator.setTitle(QString::fromStdString(curve.measure));
  generator.setDescription(curveCaption(*curve.result, curve.curve, curve.measure, curve.form));
  QCPPainter painter(&generator);
  paint(painter, curve, mm);
#endif
}

QByteArray table(const ExportedCurve& curve) {
  session::SessionResult part;
  for (const response::Response& row : curve.result->responses.rows) {
    if (row.curve == curve.curve && row.measure == curve.measure) part.responses.rows.push_back(row);
  }
  return QByteArray::fromStdString(results::responses_csv(part));
}

} // namespace

const std::vector<ExportChoice>& exportChoices() {
  static const std::vector<ExportChoice> choices{{ExportKind::pdf, 85}, {ExportKind::pdf, 175},
#ifdef QT_SVG_LIB
                                                 {ExportKind::svg, 85}, {ExportKind::svg, 175},
#endif
                                                 {ExportKind::png, 85}, {ExportKind::png, 175},
                                                 {ExportKind::csv, 0}};
  return choices;
}

QString filterText(const ExportChoice& choice) {
  const QString wide = QStringLiteral(", %1 mm wide").arg(choice.width_mm);
  switch (choice.kind) {
  case ExportKind::pdf:
    return QStringLiteral("PDF") + wide + QStringLiteral(" (*.pdf)");
  case ExportKind::svg:
    return QStringLiteral("SVG") + wide + QStringLiteral(" (*.svg)");
  case ExportKind::png:
    return QStringLiteral("PNG") + wide + QStringLiteral(" (*.png)");
  case ExportKind::csv:
    return QStringLiteral("Table of the points (*.csv)");
  }
  return {};
}

QByteArray exportedBytes(const ExportedCurve& curve, const ExportChoice& choice) {
  if (choice.kind == ExportKind::csv) return table(curve);
  QByteArray bytes;
  QBuffer buffer(&bytes);
  buffer.open(QIODevice::WriteOnly);
  const QSizeF mm = sizeInMm(choice.width_mm);
  if (choice.kind == ExportKind::pdf) writePdf(buffer, curve, mm);
  if (choice.kind == ExportKind::svg) writeSvg(buffer, curve, mm);
  if (choice.kind == ExportKind::png) writePng(buffer, curve, mm);
  return bytes;
}

Done exportCurve(const QString& path, const ExportedCurve& curve, const ExportChoice& choice) {
  return results::write_whole_file(path.toStdString(), exportedBytes(curve, choice).toStdString());
}

} // namespace chronodrome::ui::answer

// Chronodrome, GPL-3.0-or-later.
#include "ui/look/theme.h"

#include <cmath>

#include <QFontDatabase>
#include <QGuiApplication>

namespace chronodrome::ui::look {
namespace {

using recording::Role;

Theme lightTheme() {
  Theme theme;
  theme.mode = Mode::light;
  theme.window = QColor(0xF1, 0xF2, 0xF4);
  theme.surface = QColor(0xFF, 0xFF, 0xFF);
  theme.raised = QColor(0xF8, 0xF8, 0xFA);
  theme.line = QColor(0xD0, 0xD3, 0xD9);
  theme.grid = QColor(0xEC, 0xED, 0xF0);
  theme.text = QColor(0x1B, 0x1F, 0x27);
  theme.text_quiet = QColor(0x5A, 0x62, 0x70);
  theme.data = QColor(0x10, 0x13, 0x19);
  theme.accent = QColor(0x5B, 0x3C, 0xC4);
  theme.accent_fill = QColor(0xE6, 0xE0, 0xFA);
  theme.on_accent = QColor(0xFF, 0xFF, 0xFF);
  theme.plateau = QColor(0xE4, 0xEA, 0xF1);
  theme.agent = QColor(0x4A, 0x5B, 0x6C);
  theme.agent_fill = QColor(0xCD, 0xD7, 0xE1);
  theme.excluded = QColor(0x8A, 0x90, 0x9A);
  theme.caution = QColor(0x8A, 0x5A, 0x00);
  theme.fault = QColor(0xB0, 0x1E, 0x2E);
  return theme;
}

Theme darkTheme() {
  Theme theme;
  theme.mode = Mode::dark;
  theme.window = QColor(0x16, 0x18, 0x1D);
  theme.surface = QColor(0x1D, 0x20, 0x26);
  theme.raised = QColor(0x26, 0x2A, 0x31);
  theme.line = QColor(0x40, 0x46, 0x50);
  theme.grid = QColor(0x2B, 0x2F, 0x37);
  theme.text = QColor(0xE8, 0xEA, 0xEE);
  theme.text_quiet = QColor(0xA3, 0xAA, 0xB6);
  theme.data = QColor(0xF4, 0xF6, 0xF9);
  theme.accent = QColor(0xB3, 0xA0, 0xFF);
  theme.accent_fill = QColor(0x3A, 0x33, 0x5C);
  theme.on_accent = QColor(0x16, 0x18, 0x1D);
  theme.plateau = QColor(0x2E, 0x37, 0x42);
  theme.agent = QColor(0x9F, 0xB3, 0xC6);
  theme.agent_fill = QColor(0x38, 0x45, 0x52);
  theme.excluded = QColor(0x7E, 0x86, 0x92);
  theme.caution = QColor(0xF0, 0xB9, 0x4A);
  theme.fault = QColor(0xFF, 0x8A, 0x8A);
  return theme;
}

Theme paperTheme() {
  Theme theme = lightTheme();
  theme.mode = Mode::paper;
  theme.window = QColor(0xFF, 0xFF, 0xFF);
  theme.raised = QColor(0xF6, 0xF6, 0xF6);
  theme.grid = QColor(0xE6, 0xE6, 0xE6);
  theme.data = QColor(0x00, 0x00, 0x00);
  theme.text = QColor(0x00, 0x00, 0x00);
  theme.text_quiet = QColor(0x4A, 0x4A, 0x4A);
  return theme;
}

QString firstThere(std::initializer_list<const char*> families) {
  const QStringList known = QFontDatabase::families();
  for (const char* family : families) {
    if (known.contains(QLatin1String(family))) return QLatin1String(family);
  }
  return QFont().defaultFamily();
}

double channelLuminance(double c) {
  return c <= 0.03928 ? c / 12.92 : std::pow((c + 0.055) / 1.055, 2.4);
}

double luminance(const QColor& c) {
  return 0.2126 * channelLuminance(c.redF()) + 0.7152 * channelLuminance(c.greenF()) +
         0.0722 * channelLuminance(c.blueF());
}

} // namespace

QColor Theme::of(Role role) const {
  const bool dark = mode == Mode::dark;
  switch (role) {
  case Role::sinus:
    return dark ? QColor(0x2F, 0xC4, 0x9A) : QColor(0x00, 0x80, 0x5D); // bluish green
  case Role::atrial:
    return dark ? QColor(0x5B, 0xB4, 0xF2) : QColor(0x00, 0x6B, 0xA8); // blue
  case Role::his:
    return dark ? QColor(0xE0, 0x96, 0xBE) : QColor(0xA9, 0x4A, 0x80); // reddish purple
  case Role::ventricular:
  case Role::ecg:
    return dark ? QColor(0xFF, 0x8A, 0x3D) : QColor(0xC2, 0x4F, 0x00); // vermilion
  case Role::map:
    return dark ? QColor(0xC9, 0xBD, 0x5C) : QColor(0x74, 0x68, 0x00); // yellow, darkened
  case Role::tension:
  case Role::pressure:
    return dark ? QColor(0xE6, 0xB0, 0x3C) : QColor(0x8F, 0x62, 0x00); // orange, darkened
  case Role::flow:
    return dark ? QColor(0x8C, 0xCF, 0xDF) : QColor(0x1F, 0x78, 0x8E); // sky blue, darkened
  case Role::stimulus:
  case Role::temperature:
  case Role::other:
    break;
  }
  return text_quiet;
}

QFont Theme::font(TextSize size, bool bold) const {
  // Paper takes a family whose glyphs keep their characters in a PDF, so that the text can be searched.
  static const QString screen = firstThere({"Inter", "Liberation Sans", "DejaVu Sans"});
  static const QString paper = firstThere({"Liberation Sans", "DejaVu Sans"});
  QFont font(mode == Mode::paper ? paper : screen);
  font.setStyleHint(QFont::SansSerif);
  switch (size) {
  case TextSize::small:
    font.setPixelSize(11);
    break;
  case TextSize::normal:
    font.setPixelSize(13);
    break;
  case TextSize::large:
    font.setPixelSize(17);
    break;
  }
  font.setBold(bold);
  return font;
}

QPalette Theme::palette() const {
  QPalette p;
  p.setColor(QPalette::Window, window);
  p.setColor(QPalette::WindowText, text);
  p.setColor(QPalette::Base, surface);
  p.setColor(QPalette::AlternateBase, raised);
  p.setColor(QPalette::Text, text);
  p.setColor(QPalette::PlaceholderText, text_quiet);
  p.setColor(QPalette::Button, raised);
  p.setColor(QPalette::ButtonText, text);
  p.setColor(QPalette::ToolTipBase, raised);
  p.setColor(QPalette::ToolTipText, text);
  p.setColor(QPalette::Highlight, accent);
  p.setColor(QPalette::HighlightedText, on_accent);
  p.setColor(QPalette::Link, accent);
  p.setColor(QPalette::Mid, line);
  p.setColor(QPalette::Midlight, grid);
  p.setColor(QPalette::Dark, line);
  p.setColor(QPalette::Light, surface);
  p.setColor(QPalette::Disabled, QPalette::Text, excluded);
  p.setColor(QPalette::Disabled, QPalette::WindowText, excluded);
  p.setColor(QPalette::Disabled, QPalette::ButtonText, excluded);
  return p;
}

const Theme& Theme::of(Mode mode) {
  static const Theme light = lightTheme();
  static const Theme dark = darkTheme();
  static const Theme paper = paperTheme();
  switch (mode) {
  case Mode::dark:
    return dark;
  case Mode::paper:
    return paper;
  case Mode::light:
    break;
  }
  return light;
}

QColor blended(const QColor& color, const QColor& ground, double share) {
  const auto mix = [&](int a, int b) { return static_cast<int>(std::lround(share * a + (1.0 - share) * b)); };
  return QColor(mix(color.red(), ground.red()), mix(color.green(), ground.green()),
                mix(color.blue(), ground.blue()));
}

double contrast(const QColor& a, const QColor& b) {
  const double high = std::max(luminance(a), luminance(b));
  const double low = std::min(luminance(a), luminance(b));
  return (high + 0.05) / (low + 0.05);
}

Mode systemMode() {
  const QColor window = QGuiApplication::palette().color(QPalette::Window);
  return luminance(window) < 0.18 ? Mode::dark : Mode::light;
}

} // namespace chronodrome::ui::look

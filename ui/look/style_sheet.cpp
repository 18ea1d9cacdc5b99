// Chronodrome, GPL-3.0-or-later.
#include "ui/look/theme.h"

namespace chronodrome::ui::look {

QString styleSheet(const Theme& theme) {
  QString rules = QStringLiteral(R"(
* { font-size: 13px; font-family: "$family"; }
QMainWindow, QDialog { background: $window; }
QToolTip { background: $raised; color: $text; border: 1px solid $line; padding: 4px; }
QMenuBar { background: $window; color: $text; }
QMenuBar::item { padding: 4px 8px; background: transparent; }
QMenuBar::item:selected { background: $accent_fill; color: $text; }
QMenu { background: $surface; color: $text; border: 1px solid $line; padding: 4px 0; }
QMenu::item { padding: 4px 24px; }
QMenu::item:selected { background: $accent_fill; color: $text; }
QMenu::item:disabled { color: $excluded; }
QMenu::separator { height: 1px; background: $line; margin: 4px 0; }
QStatusBar { background: $window; color: $text_quiet; }
QStatusBar::item { border: none; }
QPushButton { background: $surface; color: $text; border: 1px solid $line; border-radius: 4px; padding: 6px 16px; }
QPushButton:hover { background: $accent_fill; }
QPushButton:focus { border: 2px solid $accent; padding: 5px 15px; }
QPushButton:default { background: $accent; color: $on_accent; border: 1px solid $accent; }
QPushButton:default:focus { border: 2px solid $text; padding: 5px 15px; }
QPushButton:disabled { color: $excluded; background: $window; border: 1px solid $grid; }
QToolButton { background: transparent; color: $text; border: 1px solid transparent; border-radius: 4px; padding: 4px 8px; }
QToolButton:hover, QToolButton:checked { background: $accent_fill; }
QToolButton:focus { border: 1px solid $accent; }
QLineEdit, QPlainTextEdit, QTextEdit, QComboBox, QSpinBox, QDoubleSpinBox {
  background: $surface; color: $text; border: 1px solid $line; border-radius: 4px; padding: 4px 8px;
  selection-background-color: $accent; selection-color: $on_accent; }
QLineEdit:focus, QPlainTextEdit:focus, QTextEdit:focus, QComboBox:focus, QSpinBox:focus, QDoubleSpinBox:focus {
  border: 1px solid $accent; }
QComboBox { padding-right: 24px; }
QComboBox::drop-down { border: none; width: 24px; subcontrol-origin: border; subcontrol-position: center right; }
QComboBox::down-arrow { image: none; width: 0; height: 0; border-left: 4px solid transparent;
  border-right: 4px solid transparent; border-top: 5px solid $text_quiet; }
QCheckBox::indicator:unchecked { width: 11px; height: 11px; border: 1px solid $text_quiet;
  border-radius: 2px; background: $surface; }
QComboBox QAbstractItemView { background: $surface; color: $text; border: 1px solid $line;
  selection-background-color: $accent_fill; selection-color: $text; }
QTableView, QTreeView, QListView { background: $surface; color: $text; border: 1px solid $line; gridline-color: $grid;
  selection-background-color: $accent_fill; selection-color: $text; }
QTableView QLineEdit, QTableView QComboBox { border-radius: 0; padding: 0 4px; }
QHeaderView::section { background: $raised; color: $text_quiet; border: none; border-bottom: 1px solid $line;
  border-right: 1px solid $grid; padding: 4px 8px; }
QProgressBar { background: $grid; border: none; border-radius: 4px; height: 8px; color: transparent; }
QProgressBar::chunk { background: $accent; border-radius: 4px; }
QScrollBar:vertical { background: $window; width: 12px; margin: 0; }
QScrollBar:horizontal { background: $window; height: 12px; margin: 0; }
QScrollBar::handle { background: $line; border-radius: 4px; margin: 2px; min-height: 24px; min-width: 24px; }
QScrollBar::handle:hover { background: $excluded; }
QScrollBar::add-line, QScrollBar::sub-line { width: 0; height: 0; }
QSplitter::handle { background: $window; }
QSplitter::handle:hover { background: $accent_fill; }
QLabel[quiet="true"] { color: $text_quiet; }
QLabel[textSize="small"] { font-size: 11px; }
QLabel[textSize="large"] { font-size: 17px; }
QLabel[tone="caution"] { color: $caution; }
QLabel[tone="fault"] { color: $fault; }
)");
  // Longer names first: $text_quiet before $text.
  const std::pair<const char*, QColor> names[] = {
      {"$accent_fill", theme.accent_fill},
      {"$on_accent", theme.on_accent},
      {"$text_quiet", theme.text_quiet},
      {"$excluded", theme.excluded},
      {"$surface", theme.surface},
      {"$window", theme.window},
      {"$raised", theme.raised},
      {"$accent", theme.accent},
      {"$caution", theme.caution},
      {"$fault", theme.fault},
      {"$grid", theme.grid},
      {"$line", theme.line},
      {"$text", theme.text},
  };
  for (const auto& [name, color] : names)
    rules.replace(QLatin1String(name), color.name());
  rules.replace(QLatin1String("$family"), theme.font(TextSize::normal).family());
  return rules;
}

} // namespace chronodrome::ui::look

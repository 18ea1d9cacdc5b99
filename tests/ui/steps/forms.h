// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <filesystem>
#include <functional>
#include <string>

#include <QAbstractItemView>
#include <QComboBox>
#include <QElapsedTimer>
#include <QString>
#include <QTest>
#include <QWidget>
#include <catch2/catch.hpp>

namespace chronodrome::ui_test {

/// A copy of a sample session that may be written to, gone at the end.
class SampleCopy {
public:
  explicit SampleCopy(const std::string& sample)
      : folder_(std::filesystem::path(CHRONODROME_BUILD_DIR) / "test-ui-steps" / sample) {
    std::filesystem::remove_all(folder_);
    std::filesystem::create_directories(folder_.parent_path());
    std::filesystem::copy(std::filesystem::path(CHRONODROME_SOURCE_DIR) / "sample-sessions" / sample, folder_,
                          std::filesystem::copy_options::recursive);
  }
  ~SampleCopy() { std::filesystem::remove_all(folder_); }
  SampleCopy(const SampleCopy&) = delete;
  SampleCopy& operator=(const SampleCopy&) = delete;

  [[nodiscard]] std::string path(const std::string& name) const { return (folder_ / name).string(); }
  [[nodiscard]] QString file(const std::string& name) const { return QString::fromStdString(path(name)); }

private:
  std::filesystem::path folder_;
};

/// Turns the event loop until `holds`; false after 30 s.
inline bool wait_until(const std::function<bool()>& holds) {
  QElapsedTimer timer;
  timer.start();
  while (!holds() && timer.elapsed() < 30'000)
    QTest::qWait(5);
  return holds();
}

template <class Widget>
Widget* child(QWidget& parent, const char* name) {
  auto* found = parent.findChild<Widget*>(QString::fromLatin1(name));
  INFO("widget " << name);
  REQUIRE(found != nullptr);
  return found;
}

/// Chooses `word` in a list by keys, as a user would.
inline void choose(QComboBox& box, const QString& word) {
  const int wanted = box.findText(word);
  INFO("word " << word.toStdString());
  REQUIRE(wanted >= 0);
  box.setFocus();
  while (box.currentIndex() < wanted)
    QTest::keyClick(&box, Qt::Key_Down);
  while (box.currentIndex() > wanted)
    QTest::keyClick(&box, Qt::Key_Up);
}

/// Opens the cell's editor with F2 and gives it.
template <class Editor>
Editor* edit_cell(QAbstractItemView& view, int row, int column) {
  view.setCurrentIndex(view.model()->index(row, column));
  view.setFocus();
  QTest::keyClick(&view, Qt::Key_F2);
  auto* editor = view.findChild<Editor*>(
      QString::fromLatin1(std::is_same_v<Editor, QComboBox> ? "cellComboBox" : "cellLineEdit"));
  INFO("cell " << row << ", " << column);
  REQUIRE(editor != nullptr);
  return editor;
}

/// Chooses a word in a cell that offers a list.
inline void choose_in_cell(QAbstractItemView& view, int row, int column, const QString& word) {
  auto* box = edit_cell<QComboBox>(view, row, column);
  REQUIRE(wait_until([&] { return box->view()->isVisible(); }));
  const int wanted = box->findText(word);
  REQUIRE(wanted >= 0);
  box->view()->setCurrentIndex(box->model()->index(wanted, 0));
  QTest::keyClick(box->view(), Qt::Key_Return);
  REQUIRE(wait_until([&] { return view.findChild<QComboBox*>(QStringLiteral("cellComboBox")) == nullptr; }));
}

inline void type_in_cell(QAbstractItemView& view, int row, int column, const QString& text) {
  auto* editor = edit_cell<QLineEdit>(view, row, column);
  editor->selectAll();
  QTest::keyClicks(editor, text);
  QTest::keyClick(editor, Qt::Key_Return);
  REQUIRE(wait_until([&] { return view.findChild<QLineEdit*>(QStringLiteral("cellLineEdit")) == nullptr; }));
}

} // namespace chronodrome::ui_test

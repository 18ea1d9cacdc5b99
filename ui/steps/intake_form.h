// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <memory>
#include <string>
#include <vector>

#include <QWidget>

#include "document/session_file.h"
#include "intake/table_head.h"
#include "protocol/protocol.h"
#include "recording/recording.h"
#include "session/order_check.h"
#include "session/protocol_guess.h"
#include "ui/look/theme.h"

class QComboBox;
class QLabel;
class QProgressBar;
class QPushButton;
class QStackedWidget;
class QPlainTextEdit;
class QTableWidget;
class QToolButton;
class QVBoxLayout;

namespace chronodrome::ui::steps {

class ChannelTable;
class RecordingLoader;
class SessionDraft;
class TableChoices;
struct LoadedRecording;

/// Taking a recording in: how the file is read, what its signals are, what the preparation is. Fills the
/// window's middle. Nothing is taken in before it was shown; what cannot be told surely is asked.
class IntakeForm : public QWidget {
  Q_OBJECT
public:
  explicit IntakeForm(QWidget* parent = nullptr);
  ~IntakeForm() override;

  void setTheme(const look::Theme& theme);
  /// Reads the recording in the background and shows it.
  void start(const QString& recordingPath);
  /// Takes channels, pathways, measures and settings from another session, and reads the file again if that
  /// one reads its tables in another way.
  void useLayout(const QString& sessionPath);
  [[nodiscard]] bool isReading() const;
  /// True when the recording can be taken in as shown.
  [[nodiscard]] bool isComplete() const;

public Q_SLOTS:
  /// Stops the reading and gives up.
  void cancel();
  void takeIn();

Q_SIGNALS:
  void accepted(const chronodrome::document::SessionFile& session,
                const chronodrome::protocol::Protocol& protocol,
                std::shared_ptr<const chronodrome::recording::Recording> recording);
  void cancelled();
  /// The reading ended, with a recording or an error.
  void shown();

protected:
  void keyPressEvent(QKeyEvent* event) override;
  void resizeEvent(QResizeEvent* event) override;

private:
  void build();
  QWidget* buildLeft();
  QWidget* buildRight();
  QWidget* buildFoot();
  void readAgain();
  void showHead(const intake::TableHead& head);
  void showLoaded(const LoadedRecording& loaded);
  void showError(const Error& error);
  void showFacts();
  void showWarnings();
  void showProtocols();
  void showLog();
  void showDoubts(const std::vector<session::RoleDoubt>& doubts);
  void applyDoubt(const session::RoleDoubt& doubt);
  void followEdit(const QString& step);
  void applyLayout();
  void say(const QString& text, const QString& tone = {});
  void askForLayout();
  void followState();

  QString path_;
  look::Theme theme_ = look::Theme::of(look::Mode::light);
  RecordingLoader* loader_ = nullptr;
  SessionDraft* draft_ = nullptr;
  std::vector<session::ProtocolSource> protocols_;
  std::optional<document::SessionFile> layout_; ///< chosen, to be applied when the file is read
  std::string roles_before_;                    ///< channels as proposed from, to know when roles change
  bool pathways_touched_ = false;
  bool measures_touched_ = false;

  QWidget* left_ = nullptr;
  QLabel* title_ = nullptr;
  QLabel* facts_ = nullptr;
  QWidget* table_part_ = nullptr;
  TableChoices* choices_ = nullptr;
  QWidget* file_part_ = nullptr;
  QLabel* file_facts_ = nullptr;
  QComboBox* log_ = nullptr;
  QTableWidget* log_events_ = nullptr;
  QLabel* log_hint_ = nullptr;
  QStackedWidget* middle_ = nullptr; ///< progress, question or error, tables
  QProgressBar* progress_ = nullptr;
  QLabel* progress_text_ = nullptr;
  QLabel* question_ = nullptr;
  QLabel* question_hint_ = nullptr;
  ChannelTable* channels_ = nullptr;
  QWidget* doubts_ = nullptr;
  QVBoxLayout* doubts_layout_ = nullptr;
  QLabel* warnings_title_ = nullptr;
  QPlainTextEdit* warnings_ = nullptr;
  QLabel* message_ = nullptr;
  QPushButton* layout_button_ = nullptr;
  QPushButton* take_in_ = nullptr;
};

} // namespace chronodrome::ui::steps

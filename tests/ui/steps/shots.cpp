// Chronodrome, GPL-3.0-or-later.
// Pictures to look at: `test_ui_steps "[.shot]"` writes them to the folder CHRONODROME_SHOTS.
#include <catch2/catch.hpp>

#include <QApplication>
#include <QElapsedTimer>
#include <QSignalSpy>
#include <QTest>

#include "ui/steps/additions_form.h"
#include "ui/steps/intake_form.h"
#include "ui/steps/session_form.h"

using namespace chronodrome;
using namespace chronodrome::ui;

namespace {

const QString kSamples = QStringLiteral(CHRONODROME_SOURCE_DIR "/sample-sessions/");

void shoot(QWidget& form, const QString& name) {
  const QString folder = qEnvironmentVariable("CHRONODROME_SHOTS", QStringLiteral("/tmp"));
  QTest::qWait(300);
  REQUIRE(form.grab().save(folder + QLatin1Char('/') + name + QStringLiteral(".png")));
}

void put_on(QWidget& form, look::Mode mode, QSize size) {
  const auto& theme = look::Theme::of(mode);
  QApplication::setPalette(theme.palette());
  QApplication::setFont(theme.font(look::TextSize::normal));
  qApp->setStyleSheet(look::styleSheet(theme));
  form.resize(size);
  form.show();
  REQUIRE(QTest::qWaitForWindowExposed(&form));
}

} // namespace

TEST_CASE("pictures of taking in", "[.shot]") {
  for (const auto mode : {look::Mode::light, look::Mode::dark}) {
    for (const QSize size : {QSize(1280, 720), QSize(2560, 1360), QSize(1000, 600)}) {
      if (mode == look::Mode::dark && size.width() != 1280) continue;
      for (const char* file :
           {"rabbit-heart/recording.edf", "guinea-pig-heart/recording.edf", "atrial-strip/recording.csv"}) {
        steps::IntakeForm form;
        form.setTheme(look::Theme::of(mode));
        put_on(form, mode, size);
        QSignalSpy shown(&form, &steps::IntakeForm::shown);
        form.start(kSamples + QString::fromLatin1(file));
        REQUIRE(shown.wait(20000));
        QTest::qWait(1500);
        shoot(form, QStringLiteral("intake-%1-%2-%3")
                        .arg(QString::fromLatin1(file).section('/', 0, 0))
                        .arg(size.width())
                        .arg(mode == look::Mode::dark ? "dark" : "light"));
      }
    }
  }
}

TEST_CASE("pictures of the forms beside the story", "[.shot]") {
  for (const auto mode : {look::Mode::light, look::Mode::dark}) {
    for (const char* sample : {"guinea-pig-heart", "rabbit-heart"}) {
      SessionDocument document;
      Focus focus;
      QSignalSpy opened(&document, &SessionDocument::opened);
      document.open(kSamples + QString::fromLatin1(sample) + '/' + QString::fromLatin1(sample) +
                    ".session.json");
      REQUIRE(opened.wait(20000));
      focus.reset(document.recording()->duration);
      const QString end = QString::fromLatin1(sample) + (mode == look::Mode::dark ? "-dark" : "-light");
      steps::AdditionsForm additions(document, focus);
      additions.setTheme(look::Theme::of(mode));
      put_on(additions, mode, QSize(400, 700));
      shoot(additions, "additions-" + end);
      additions.proposeAnnotations();
      additions.addRow();
      shoot(additions, "additions-typing-" + end);
      steps::SessionForm form(document);
      form.setTheme(look::Theme::of(mode));
      put_on(form, mode, QSize(400, 700));
      shoot(form, "session-channels-" + end);
      form.showPage(steps::SessionForm::kPreparation);
      shoot(form, "session-preparation-" + end);
      form.showPage(steps::SessionForm::kSettings);
      shoot(form, "session-settings-" + end);
    }
  }
}

// Chronodrome, GPL-3.0-or-later.
#include "ui/look/theme.h"

#include <catch2/catch.hpp>

using namespace chronodrome;
using namespace chronodrome::ui::look;
using recording::Role;

namespace {

constexpr Mode kModes[] = {Mode::light, Mode::dark, Mode::paper};

} // namespace

TEST_CASE("the contrast of black on white and of equal colours is that of the standard", "[ui][look]") {
  // WCAG 2.1, definition of contrast ratio: 21 and 1.
  CHECK(contrast(Qt::black, Qt::white) == Approx(21.0));
  CHECK(contrast(QColor(10, 80, 200), QColor(10, 80, 200)) == Approx(1.0));
  // #777777 on white, a published border case: 4.48.
  CHECK(contrast(QColor(0x77, 0x77, 0x77), Qt::white) == Approx(4.48).margin(0.005));
}

TEST_CASE("text has 4.5:1 and graphics 3:1 against their ground in every mode", "[ui][look]") {
  for (const Mode mode : kModes) {
    const Theme& theme = Theme::of(mode);
    INFO("mode " << static_cast<int>(mode));
    for (const QColor& ground : {theme.surface, theme.window, theme.raised}) {
      CHECK(contrast(theme.text, ground) >= 4.5);
      CHECK(contrast(theme.text_quiet, ground) >= 4.5);
      CHECK(contrast(theme.caution, ground) >= 4.5);
      CHECK(contrast(theme.fault, ground) >= 4.5);
      CHECK(contrast(theme.accent, ground) >= 4.5);
      CHECK(contrast(theme.excluded, ground) >= 2.8);
    }
    CHECK(contrast(theme.on_accent, theme.accent) >= 4.5);
    CHECK(contrast(theme.text, theme.accent_fill) >= 4.5);
    CHECK(contrast(theme.agent, theme.surface) >= 3.0);
    CHECK(contrast(theme.excluded, theme.surface) >= 3.0);
    for (const Role role :
         {Role::sinus, Role::atrial, Role::his, Role::ventricular, Role::ecg, Role::map, Role::stimulus,
          Role::tension, Role::pressure, Role::flow, Role::temperature, Role::other}) {
      INFO("role " << recording::name_of(role));
      CHECK(contrast(theme.of(role), theme.surface) >= 3.0);
      // Data stay visible on the ground of a plateau.
      CHECK(contrast(theme.of(role), theme.plateau) >= 3.0);
    }
  }
}

TEST_CASE("the rules of a window name every colour of the theme", "[ui][look]") {
  for (const Mode mode : kModes)
    CHECK_FALSE(styleSheet(Theme::of(mode)).contains(QLatin1Char('$')));
}

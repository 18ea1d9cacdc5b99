// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>

#include "base/quantity.h"
#include "base/result.h"

namespace chronodrome::protocol {

/// A concentration as it was typed: the number, and the unit that stands beside it.
struct TypedConcentration {
  Molar value;
  std::string number; ///< as parse_number() reads it: `3e-8` for `3x10^-8`
  std::string unit;
};

/// Reads what people type or paste into a cell: `1e-7`, `1,00E-07`, `10^-7`, `3x10-8`, `3·10⁻⁸`, and with a
/// unit attached `100 nM`, `0,1µM`. `unit` is that of the unit cell; one in the text wins. A comma counts as
/// the decimal mark. Errors: bad_value (no number; both marks; a negative number, which may be a logarithm;
/// no unit, or none that is known). `file` and `place` of the error are left empty.
Result<TypedConcentration> typed_concentration(const std::string& text, const std::string& unit);

} // namespace chronodrome::protocol

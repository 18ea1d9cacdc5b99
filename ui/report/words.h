// Chronodrome, GPL-3.0-or-later.
#pragma once

#include <string>
#include <string_view>

#include <QString>

#include "document/session_file.h"
#include "response/response.h"
#include "session/session_result.h"

// Words and numbers as the report writes them, beyond ui/look/number_text.h.
namespace chronodrome::ui::report {

/// Text of a user or a file as it may stand in a page: line ends and tabs as blanks, characters that no page
/// or XML can hold replaced.
QString plain(std::string_view text);
QString plain(const QString& text);
/// The same, line ends and tabs left as they are: for markup of ours.
QString withoutControls(const QString& markup);

/// `not stated` for an empty text.
QString statedOr(const std::string& text);

/// `217.3 ± 1.4`, or the bound or status in words.
QString valueText(const response::Response& response);

/// `12:30.0 to 13:00.0`.
QString stretchText(Seconds start, Seconds end);
/// Seconds with one decimal, as the tables of the results folder count them.
QString secondsText(Seconds time);

/// `wenckebach` as `Wenckebach`, `two_to_one` as `2:1 block`: the kinds of rhythm in words.
QString rhythmText(const std::string& kind);
/// `ratio=3:2;groups=3` as `ratio 3:2, groups 3`.
QString detailText(const std::string& detail);

/// A fit's flag with its meaning and what to do: the closed list of the fits.
QString flagWord(const std::string& flag);

/// The result of one fit in one sentence: a value only where the data bound it, else the bound, else why not.
QString fitSentence(const session::SessionResult& result, const session::FittedCurve& curve);

/// `1: acetylcholine with atropine 1e-07 M`.
QString curveName(int curve, const std::string& agent, const std::string& background);

QString settingText(const document::SettingValue& value);

} // namespace chronodrome::ui::report

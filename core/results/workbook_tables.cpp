// Chronodrome, GPL-3.0-or-later.
#include "results/workbook_tables.h"

#include "pharmacology/flags.h"
#include "protocol/concentration.h"
#include "results/csv_text.h"
#include "results/fit_units.h"
#include "session/analysis_settings.h"

namespace chronodrome::results {
namespace {

using Rows = std::vector<std::vector<SheetCell>>;

std::string words_of(const std::vector<std::string>& flags) {
  std::string text;
  for (const auto& flag : flags)
    text += (text.empty() ? "" : " ") + flag;
  return text;
}

/// Collects rows; texts are made safe for a spreadsheet, missing values leave their cell empty.
class SummarySheet {
public:
  void text(const std::string& section, const std::string& item, const std::string& value,
            const std::string& note = {}) {
    rows_.push_back({section, without_formula(item), without_formula(value), without_formula(note)});
  }
  void number(const std::string& section, const std::string& item, std::optional<double> value,
              const std::string& note = {}) {
    const SheetCell cell = value ? SheetCell(*value) : SheetCell();
    rows_.push_back({section, without_formula(item), cell, without_formula(note)});
  }
  void count(const std::string& section, const std::string& item, std::size_t value) {
    number(section, item, static_cast<double>(value));
  }
  Rows take() { return std::move(rows_); }

private:
  Rows rows_;
};

void add_preparation(SummarySheet& sheet, const document::Preparation& one) {
  const std::string section = "preparation";
  sheet.text(section, "label", one.label);
  sheet.text(section, "species", one.species);
  sheet.text(section, "tissue", one.tissue);
  sheet.number(section, "temperature_c", one.temperature_c, "degrees Celsius");
  sheet.number(section, "bath_volume_ml", one.bath_volume_ml, "mL");
  sheet.text(section, "animal", one.animal);
  sheet.text(section, "sex", one.sex);
  sheet.number(section, "mass_g", one.mass_g, "g");
  sheet.text(section, "date", one.date);
  sheet.text(section, "operator", one.operator_name);
  sheet.text(section, "group", one.group);
  sheet.number(section, "arrival_delay_s", one.arrival_delay.value(), "s, from the tap to the tissue");
  sheet.text(section, "notes", one.notes);
}

void add_recording(SummarySheet& sheet, const recording::Recording& recording) {
  const std::string section = "recording";
  sheet.number(section, "duration_s", recording.duration.value(), "s");
  sheet.text(section, "clock_time_of_zero", recording.clock_start.value_or(""), "as the file states it");
  sheet.number(section, "file_time_of_zero_s", recording.file_time_of_zero.value(), "s");
  for (const auto& file : recording.files) {
    sheet.text(section, "file", file.path, file.kind);
    sheet.text(section, "sha256", file.sha256, file.path);
    sheet.number(section, "bytes", static_cast<double>(file.bytes), file.path);
    sheet.number(section, "start_s", file.start.value(), file.path);
  }
  for (const auto& note : recording.file_notes)
    sheet.text(section, "note of the file", note);
}

std::string unit_and_meaning(const session::SettingRow& row) {
  return (row.unit.empty() ? std::string() : row.unit + "; ") + row.meaning;
}

void add_settings(SummarySheet& sheet, const session::SessionResult& result) {
  const std::string section = "settings that differ from the defaults";
  if (result.settings_changed.empty()) sheet.text(section, "none", "");
  for (const auto& key : result.settings_changed) {
    std::string note;
    for (const auto& row : session::setting_rows()) {
      if (row.key == key) note = unit_and_meaning(row);
    }
    const auto& value = result.settings.at(key);
    if (const auto* number = std::get_if<double>(&value)) {
      sheet.number(section, key, *number, note);
    } else if (const auto* truth = std::get_if<bool>(&value)) {
      sheet.text(section, key, *truth ? "true" : "false", note);
    } else {
      sheet.text(section, key, std::get<std::string>(value), note);
    }
  }
}

void add_flags(SummarySheet& sheet, const session::SessionResult& result) {
  for (const auto& curve : result.curves) {
    const std::string where =
        "curve " + std::to_string(curve.curve) + " " + curve.measure + " " + curve.fit.likelihood;
    for (const auto& flag : curve.fit.flags) {
      std::string note;
      for (const auto& meaning : pharmacology::flag_meanings()) {
        if (meaning.flag == flag) note = std::string(meaning.meaning) + "; " + std::string(meaning.advice);
      }
      sheet.text("flags of fits", where, flag, note);
    }
  }
  for (const auto& row : result.responses.rows) {
    for (const auto& flag : row.flags) {
      sheet.text("flags of responses", "curve " + std::to_string(row.curve) + " " + row.measure, flag,
                 protocol::concentration_text(row.concentration));
    }
  }
}

} // namespace

std::string fits_table(const session::SessionResult& result) {
  CsvTable table(
      "curve,agent,background,preparation,measure,model,likelihood,n_points,parameter,unit,estimate,"
      "se,ci_low,ci_high,ci_method,converged,flags");
  for (const auto& curve : result.curves) {
    const auto add = [&](const pharmacology::NamedEstimate& one) {
      table.text(std::to_string(curve.curve))
          .text(curve.agent)
          .text(curve.background)
          .text(curve.preparation);
      table.text(curve.measure).text(curve.fit.model).text(curve.fit.likelihood).count(curve.fit.n_points);
      table.text(one.name).text(unit_of_parameter(result, curve, one.name));
      table.number(one.value.estimate)
          .number(one.value.se)
          .number(one.value.ci_low)
          .number(one.value.ci_high);
      table.text(one.value.ci_method)
          .text(curve.fit.converged ? "yes" : "no")
          .text(words_of(curve.fit.flags));
      table.end_row();
    };
    for (const auto& one : curve.fit.parameters)
      add(one);
    for (const auto& one : curve.fit.derived)
      add(one);
  }
  return table.take();
}

std::vector<std::vector<SheetCell>> summary_rows(const session::SessionResult& result,
                                                 const std::string& program_version) {
  SummarySheet sheet;
  sheet.text("program", "name", "Chronodrome", "research use only; not for diagnosis");
  sheet.text("program", "version", program_version);
  sheet.text("session", "path", result.session.path);
  sheet.text("session", "sha256", result.session_sha256, result.session.path);
  add_preparation(sheet, result.session.preparation);
  add_recording(sheet, *result.recording);
  add_settings(sheet, result);
  sheet.count("counts", "responses", result.responses.rows.size());
  sheet.count("counts", "curves", result.curves.size());
  sheet.count("counts", "rhythm episodes", result.rhythm.episodes.size());
  sheet.count("counts", "corrections", result.session.review.size());
  sheet.count("counts", "windows placed by hand", result.session.windows.size());
  sheet.count("counts", "warnings", result.warnings.size());
  for (const auto& warning : result.warnings)
    sheet.text("warnings", "warning", describe(warning));
  add_flags(sheet, result);
  return sheet.take();
}

} // namespace chronodrome::results

#include "db/sha256.h"
#include "limits/explain.h"
#include "station/base/files.h"
#include "station/base/strict_yaml.h"
#include "station/measure/model.h"
#include "station/text/limits.h"
#include "station/text/sheet_json.h"

namespace probewright::text {
namespace {

void append(Problems& to, const Problems& more) { to.insert(to.end(), more.begin(), more.end()); }

/// What a sheet and the model that it is for tell differently.
Problems faults_against_model(const limits::Sheet& sheet, const std::string& file) {
  const auto text = read_file(file, yaml::Document::max_bytes);
  if (!text) return {text.error()};
  const auto model = measure::read_model(*text, file);
  if (!model) return model.error();
  Problems faults = limits::faults_against_routine(sheet, model->routine);
  std::vector<limits::ModelBin> bins;
  for (const auto& bin : model->bins) bins.push_back({bin.name, bin.nominal_nm.red, bin.coded_ohm});
  append(faults, limits::faults_against_bins(sheet, bins));
  const Digest digest = db::sha256(*text);
  if (sheet.for_model && *sheet.for_model != digest)
    faults.push_back({"sheet_for_other_model", sheet.file, {{"model", file}, {"digest", to_hex(digest)}}});
  return faults;
}

}  // namespace

int limits_check(const LimitsCheckOptions& options, Console& console) {
  const auto text = read_file(options.file, yaml::Document::max_bytes);
  if (!text) return console.refuse(text.error());
  const limits::SheetReport report = limits::explain(*text, options.file);
  if (!report.usable()) return console.refuse(report.faults);
  const Problems faults = options.model.empty() ? Problems{} : faults_against_model(*report.sheet, options.model);
  if (!faults.empty()) return console.refuse(faults);
  if (console.json())
    console.print_json(json_of(report));
  else
    console.print_text(limits::to_text(report));
  return done;
}

}  // namespace probewright::text

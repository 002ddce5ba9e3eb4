#include "station/text/lab_file.h"

#include "limits/words.h"
#include "station/base/files.h"
#include "station/base/numbers.h"

namespace probewright::text {

ResultOrFaults<CsvTable> read_lab_file(const std::string& file, const CsvRules& rules) {
  const auto text = read_file(file, rules.max_bytes);
  if (!text) return Problems{text.error()};
  return read_csv(*text, rules, file);
}

Problem in_file(Problem problem, const std::string& file) {
  if (problem.where.empty()) problem.where = file;
  return problem;
}

Json json_of(const measure::Figure& figure) {
  Json json = Json::object();
  json.set("value", figure.value).set("expanded_uncertainty", figure.expanded_uncertainty).set("unit", figure.unit);
  return json;
}

std::vector<std::string> cells_of(std::string_view name, const measure::Figure& figure) {
  const int decimals = limits::decimals_for(figure.expanded_uncertainty, figure.value);
  return {std::string{name}, fixed(figure.value, decimals), fixed(figure.expanded_uncertainty, decimals),
          figure.unit == "1" ? "" : figure.unit};
}

}  // namespace probewright::text

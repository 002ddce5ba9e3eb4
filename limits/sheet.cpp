#include "limits/sheet.h"

#include <algorithm>

#include "station/base/numbers.h"

namespace probewright::limits {
namespace {

std::string where_is(const Sheet& sheet) {
  const std::string title = "sheet " + sheet.name + " revision " + std::to_string(sheet.revision);
  return sheet.file.empty() ? title : sheet.file;
}

const ModelBin* find_bin(std::span<const ModelBin> bins, std::string_view name) {
  const auto found = std::find_if(bins.begin(), bins.end(), [name](const ModelBin& b) { return b.name == name; });
  return found == bins.end() ? nullptr : &*found;
}

std::string told(double nominal, double resistor_ohm) {
  return shortest(nominal) + ", " + shortest(resistor_ohm) + " ohm";
}

}  // namespace

const CheckRule* Sheet::find(std::string_view check) const {
  const auto found =
      std::find_if(checks.begin(), checks.end(), [check](const CheckRule& r) { return r.check == check; });
  return found == checks.end() ? nullptr : &*found;
}

Problems faults_against_routine(const Sheet& sheet, std::span<const std::string> routine) {
  Problems faults;
  for (const std::string& check : routine)
    if (!sheet.find(check)) faults.push_back({"sheet_lacks_check", where_is(sheet), {{"check", check}}});
  return faults;
}

Problems faults_against_bins(const Sheet& sheet, std::span<const ModelBin> model_bins) {
  Problems faults;
  const std::vector<Bin> bins = sheet.bins ? sheet.bins->bins : std::vector<Bin>{};
  for (const Bin& bin : bins) {
    const ModelBin* other = find_bin(model_bins, bin.name);
    if (!other)
      faults.push_back({"sheet_bin_only_here", where_is(sheet), {{"bin", bin.name}}});
    else if (other->nominal != bin.nominal || other->resistor_ohm != bin.resistor_ohm)
      faults.push_back({"sheet_bin_differs",
                        where_is(sheet),
                        {{"bin", bin.name},
                         {"here", told(bin.nominal, bin.resistor_ohm)},
                         {"model", told(other->nominal, other->resistor_ohm)}}});
  }
  for (const ModelBin& other : model_bins)
    if (std::none_of(bins.begin(), bins.end(), [&](const Bin& b) { return b.name == other.name; }))
      faults.push_back({"sheet_bin_only_in_model", where_is(sheet), {{"bin", other.name}}});
  return faults;
}

std::vector<std::string> judged_checks(const Sheet& sheet, std::span<const std::string> routine) {
  std::vector<std::string> judged;
  for (const std::string& check : routine)
    if (const CheckRule* rule = sheet.find(check); rule && rule->use == Use::judged) judged.push_back(check);
  return judged;
}

}  // namespace probewright::limits

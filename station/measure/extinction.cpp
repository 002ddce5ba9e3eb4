#include "station/measure/extinction.h"

#include <algorithm>

#include "station/base/csv.h"
#include "station/base/numbers.h"

namespace probewright::measure {

Result<Extinction> ExtinctionTable::at(double nm) const {
  if (!(nm >= from_nm() && nm <= to_nm()))
    return Problem{
        "table_outside", "", {{"nm", shortest(nm)}, {"from", shortest(from_nm())}, {"to", shortest(to_nm())}}};
  const auto above =
      std::lower_bound(rows_.begin(), rows_.end(), nm, [](const Row& row, double x) { return row.nm < x; });
  if (above == rows_.begin()) return above->value;
  const Row &high = *above, &low = *(above - 1);
  const double part = (nm - low.nm) / (high.nm - low.nm);
  return Extinction{low.value.oxygenated + part * (high.value.oxygenated - low.value.oxygenated),
                    low.value.deoxygenated + part * (high.value.deoxygenated - low.value.deoxygenated)};
}

Result<double> ExtinctionTable::equal_absorption_nm(double low_nm, double high_nm) const {
  for (const double end : {low_nm, high_nm})
    if (const auto there = at(end); !there) return there.error();
  const auto difference = [this](double nm) {
    const Extinction e = at(nm).value();
    return e.oxygenated - e.deoxygenated;
  };
  const bool rising = difference(low_nm) < 0.0;
  if ((difference(high_nm) < 0.0) == rising)
    return Problem{"table_no_crossing", "", {{"from", shortest(low_nm)}, {"to", shortest(high_nm)}}};
  for (int halving = 0; halving < 60; ++halving) {
    const double middle = 0.5 * (low_nm + high_nm);
    ((difference(middle) < 0.0) == rising ? low_nm : high_nm) = middle;
  }
  return 0.5 * (low_nm + high_nm);
}

ResultOrFaults<ExtinctionTable> read_extinction(std::string_view text, std::string_view file) {
  CsvRules rules;
  rules.needed = {"wavelength_nm", "HbO2", "Hb"};
  const auto csv = read_csv(text, rules, file);
  if (!csv) return csv.error();
  const auto& nm = csv->columns[static_cast<std::size_t>(csv->column("wavelength_nm"))];
  const auto& oxygenated = csv->columns[static_cast<std::size_t>(csv->column("HbO2"))];
  const auto& deoxygenated = csv->columns[static_cast<std::size_t>(csv->column("Hb"))];
  Problems faults;
  ExtinctionTable table;
  for (std::size_t i = 0; i < nm.size(); ++i) {
    const std::string row = std::to_string(i + 1);
    if (i > 0 && !(nm[i] > nm[i - 1])) faults.push_back({"table_not_rising", file, {{"row", row}}});
    if (!(oxygenated[i] > 0.0) || !(deoxygenated[i] > 0.0))
      faults.push_back({"table_not_positive", file, {{"row", row}}});
    table.rows_.push_back({nm[i], {oxygenated[i], deoxygenated[i]}});
  }
  if (!faults.empty()) return faults;
  return table;
}

}  // namespace probewright::measure

#pragma once
#include <string_view>
#include <vector>

#include "station/base/result.h"

namespace probewright::measure {

/// Molar extinction of oxygenated and deoxygenated haemoglobin at one wavelength; the unit is the table's own.
struct Extinction {
  double oxygenated = 0.0;
  double deoxygenated = 0.0;
  bool operator==(const Extinction&) const = default;
};

/// A published table of both, linear between its rows.
class ExtinctionTable {
 public:
  double from_nm() const { return rows_.front().nm; }
  double to_nm() const { return rows_.back().nm; }
  /// Errors: table_outside (the table is never continued beyond its ends).
  Result<Extinction> at(double nm) const;
  /// The wavelength from `low_nm` to `high_nm` at which both absorb alike, by bisection; errors: table_outside,
  /// table_no_crossing (the difference has the same sign at both ends).
  Result<double> equal_absorption_nm(double low_nm, double high_nm) const;
  bool operator==(const ExtinctionTable&) const = default;

 private:
  friend ResultOrFaults<ExtinctionTable> read_extinction(std::string_view text, std::string_view file);
  struct Row {
    double nm;
    Extinction value;
    bool operator==(const Row&) const = default;
  };
  std::vector<Row> rows_;
};

/// Reads a table from CSV text: columns wavelength_nm, HbO2, Hb; lines that start with '#' are comments.
/// Errors, all at once: those of read_csv; table_not_rising; table_not_positive.
ResultOrFaults<ExtinctionTable> read_extinction(std::string_view text, std::string_view file);

}  // namespace probewright::measure

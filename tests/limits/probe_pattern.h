#pragma once
#include <map>
#include <string>
#include <vector>

#include "limits/diagnosis/diagnose.h"

/// The demonstration's rules and sheet, read from the sources.
const probewright::limits::diagnosis::Rules& probe_rules();
const probewright::limits::Sheet& probe_sheet();

/// What one probe reads, in the units of the catalogue, in the form of a run: values, or reasons why there is none.
struct ProbeReadings {
  std::map<std::string, double> values;
  std::map<std::string, std::string> missing;

  ProbeReadings& with(const std::map<std::string, double>& changed);
  ProbeReadings& without(const std::vector<std::string>& checks, const std::string& reason);
  /// Judged by the sheet, each with half of the uncertainty that it declares.
  std::vector<probewright::limits::diagnosis::JudgedValue> judged() const;
};

/// A nominal AQ-20. Source: the demonstration's model and the design: 1.95 / 1.30 V, 660 / 940.3 nm, 19.07 / 46.08 nm,
/// 100 / 150 nA/mA, 0.8 nA, warm-up 7.9 mV and, by the infrared LED's power and coefficient, 4.0 mV.
ProbeReadings nominal_probe();

/// What diagnosis says of it.
probewright::limits::diagnosis::Diagnosis diagnosed(const ProbeReadings& readings);
/// Slug of its first cause; "nothing_wrong" or "none_of_known" without one.
std::string first_cause(const probewright::limits::diagnosis::Diagnosis& diagnosis);

#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "station/base/result.h"
#include "station/measure/bands.h"
#include "station/measure/saturation.h"

namespace probewright::measure {

/// How the two LEDs are connected; an antiparallel pair has no reverse leakage of its own.
enum class Wiring { separate, common, antiparallel };

/// One pair of modulation depths that the phantom produces (amplitude over mean, 1 = 100 %).
struct SetPoint {
  double ratio = 0.0;  ///< nominal R = red depth / infrared depth; names the set point
  PerBand<double> depth;
  bool operator==(const SetPoint&) const = default;
};

/// One bin of LEDs and the resistor that codes it in the plug.
struct Bin {
  std::string name;
  double coded_ohm = 0.0;
  PerBand<double> nominal_nm;  ///< centroids at 25 C
  bool operator==(const Bin&) const = default;
};

/// Whether an error is shared by all probes of a nest or station, or drawn anew for each probe.
enum class Scope { common, per_probe };
std::string_view slug(Scope scope);

/// A part of a check's uncertainty that is not found from the captures themselves.
struct BudgetItem {
  std::string name;       ///< slug, "wavelength_scale"
  double absolute = 0.0;  ///< standard uncertainty in the unit of the check
  double relative = 0.0;  ///< standard uncertainty as a part of the reading (0.01 = 1 %); added in quadrature
  Scope scope = Scope::common;
  bool operator==(const BudgetItem&) const = default;
};
struct Budget {
  std::string check;
  std::vector<BudgetItem> items;
  bool operator==(const Budget&) const = default;
};

/// What refers a reading to 25 C, and how well that is known (standard uncertainties, names ending in _u).
struct TemperatureModel {
  double temperature_u_K = 0.0;  ///< of the probe's temperature against the nest's corrected thermometer
  PerBand<double> centroid_nm_per_K, centroid_nm_per_K_u;  ///< peak and half-power centre move alike
  PerBand<double> width_nm_per_K, width_nm_per_K_u;
  PerBand<double> voltage_V_per_K, voltage_V_per_K_u;
  PerBand<double> light_percent_per_K, light_percent_per_K_u;
  double dark_doubling_K = 10.0, dark_doubling_K_u = 0.0;
  bool operator==(const TemperatureModel&) const = default;
};

/// How the ambient light that the probe takes up is captured.
struct AmbientPlan {
  double lamp_level = 0.0;  ///< of full
  double flicker_Hz = 0.0;
  double capture_s = 0.0;  ///< with the lamp on, and once more with it off
  bool operator==(const AmbientPlan&) const = default;
};
/// How the light around the phantom is captured.
struct ClosedPathPlan {
  double capture_s = 0.0;
  bool operator==(const ClosedPathPlan&) const = default;
};
/// How the slots of one LED alone are captured, for each of the two.
struct AloneSlotsPlan {
  double capture_s = 0.0;
  bool operator==(const AloneSlotsPlan&) const = default;
};

/// A probe type: what is asked of the devices, what is expected, and which checks are made.
/// Its limits stand on the sheet, never here.
struct Model {
  std::string name;  ///< "AQ-20"
  int revision = 0;
  std::string reason;          ///< why this revision was made
  std::string description;     ///< for people
  std::string serial_pattern;  ///< ECMAScript regular expression for the whole serial number
  std::string gtin;            ///< GTIN-8, 12, 13 or 14 of what is sold, for its label; empty: none
  Wiring wiring = Wiring::separate;

  PerBand<double> drive_mA;          ///< current in the LED's slot
  PerBand<double> quarter_drive_mA;  ///< the second current of the forward voltage
  double ceiling_mA = 0.0;           ///< never exceeded, whatever a file says
  double slot_s = 0.0;               ///< a cycle is four slots: red, dark, infrared, dark
  double warmup_s = 0.0;             ///< both LEDs driven before warm voltages, the light's level and spectra are read
  double pulses_after_s = 0.0;       ///< both LEDs driven before the first pulses; warmup_s unless the file says so
  double reverse_bias_V = 0.0;       ///< for the LED's reverse leakage
  double mains_time_s = 0.0;         ///< averaging of the mains pick-up

  double modulator_Hz = 0.0;
  double pulse_capture_s = 0.0;
  std::vector<SetPoint> set_points;  ///< rising ratio

  double exposure_start_s = 0.0, exposure_min_s = 0.0, exposure_max_s = 0.0;
  double exposure_target = 0.0;  ///< wanted peak as a part of full scale, dark level subtracted
  int frames = 0;                ///< averaged in one reading of the spectrometer

  double dark_bias_V = 0.0;
  double dark_time_s = 0.0;

  std::vector<Bin> bins;  ///< rising resistance

  // Only where the routine's checks need them.
  std::optional<AmbientPlan> ambient;
  std::optional<ClosedPathPlan> closed_path;
  std::optional<AloneSlotsPlan> alone_slots;
  std::optional<SaturationModel> saturation;
  TemperatureModel temperature;
  std::vector<Budget> budgets;       ///< one for each check that carries an uncertainty
  std::vector<std::string> routine;  ///< slugs of the checks that are made, in catalogue order

  double cycle_s() const { return 4.0 * slot_s; }
  /// Cycles of one pulse capture: the least multiple of 32 (the adapter's block) that lasts pulse_capture_s.
  int pulse_cycles() const;
  /// The same for any length: cycles of a capture that lasts `capture_s`.
  int cycles_for(double capture_s) const;
  bool has_check(std::string_view check) const;
  /// Needs of all checks of the routine, or-ed (catalogue.h).
  unsigned needs() const;
  /// The set points that the routine's checks need, rising.
  std::vector<SetPoint> needed_set_points() const;
  /// The needed set points in the order of their captures: rising, but the one that stands for the light's level last,
  /// when the LEDs are warmest.
  std::vector<SetPoint> set_points_in_order() const;
  /// Whether the spectrum of the red LED alone is wanted: for its secondary emission, and to take its light out of the
  /// infrared line's window.
  bool wants_red_alone() const;
  /// The set point whose capture stands for the light's level: the one nearest to ratio 1; nullptr: no set points.
  const SetPoint* level_set_point() const;
  const Budget* budget(std::string_view check) const;
  bool operator==(const Model&) const = default;
};

/// Reads a model from its YAML text (configs/models/aq-20.yaml shows the whole form). `file` names the text in faults.
/// Errors, all of them at once with line and column: what strict YAML tells (keys, numbers, units), and
///   model_out_of_range      a value outside what the devices can do or what makes sense
///   model_drive_above_ceiling
///   model_set_point_ratio   nominal ratio and depths do not agree
///   model_not_rising        set points or bins are not in rising order
///   model_bins_too_close    two coded resistances differ by less than 15 %
///   model_unknown_check     a slug that the catalogue lacks (model_unknown_check_near: and which one is near)
///   model_check_not_made    a check that evaluate() cannot compute
///   model_check_twice, model_check_order
///   model_set_point_missing a ratio check without its set point
///   model_budget_missing    a check of the routine that carries an uncertainty has no budget
///   model_bad_pattern       the serial-number pattern is not a regular expression
///   model_bad_gtin          not 8, 12, 13 or 14 digits, or a wrong check digit
///   model_capture_short, model_id_kind, model_bins_missing, model_budget_empty, model_routine_empty,
///   model_unknown_word
///   model_section_missing   a check of the routine needs a section that the file lacks
///   model_set_points_few    a check needs more set points than there are
///   model_curve_not_falling, model_curve_kind, model_curve_short, model_bad_sha256: of the saturation section
/// The haemoglobin table that the model names is not read here: see attach_haemoglobin.
ResultOrFaults<Model> read_model(std::string_view text, std::string_view file);

/// Puts the haemoglobin table (the text of the CSV file that model.saturation names) into the model; evaluate() needs
/// it there. Whoever reads the file compares its digest with model.saturation->table_sha256. Without a saturation
/// section nothing is done.
/// Faults: those of read_extinction; model_table_short (the table does not span 605 to 1000 nm).
Problems attach_haemoglobin(Model& model, std::string_view table_text, std::string_view file);

}  // namespace probewright::measure

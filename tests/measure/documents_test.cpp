#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "station/base/catalogue.h"
#include "station/base/problem_table.h"
#include "station/measure/certificate.h"
#include "station/measure/evaluate.h"
#include "station/measure/model.h"
#include "synthetic.h"
#include "tests/support/expect.h"
#include "tests/support/reference.h"

using namespace synthetic;

namespace {

std::string aq_20_text() { return text_of(source_path("configs/models/aq-20.yaml")); }
std::string phantom_text() { return text_of(source_path("configs/certificates/phantoms/PH-01.yaml")); }
std::string adapter_text() { return text_of(source_path("configs/certificates/adapters/AD-01.yaml")); }

std::string replaced(std::string text, const std::string& what, const std::string& with) {
  const auto at = text.find(what);
  if (at == std::string::npos) throw std::logic_error("the text lacks: " + what);
  return text.replace(at, what.size(), with);
}

std::vector<std::string> ids(const Problems& problems) {
  std::vector<std::string> out;
  for (const Problem& p : problems) {
    out.push_back(p.id);
    EXPECT_NE(find_problem(p.id), nullptr) << p.id << " is not in the table";
    EXPECT_EQ(p.what().find('{'), std::string::npos) << p.what();  // every {name} is filled
    EXPECT_EQ(p.remedy().find('{'), std::string::npos) << p.remedy();
  }
  std::sort(out.begin(), out.end());
  return out;
}

std::vector<std::string> model_faults(const std::string& text) {
  const auto model = read_model(text, "m.yaml");
  return model ? std::vector<std::string>{} : ids(model.error());
}
std::vector<std::string> phantom_faults(const std::string& text) {
  const auto certificate = read_phantom_certificate(text, "c.yaml");
  return certificate ? std::vector<std::string>{} : ids(certificate.error());
}
std::vector<std::string> adapter_faults(const std::string& text) {
  const auto certificate = read_adapter_certificate(text, "c.yaml");
  return certificate ? std::vector<std::string>{} : ids(certificate.error());
}
using Ids = std::vector<std::string>;

}  // namespace

TEST(Model, TheDemonstrationModelIsRead) {
  const Model model = aq_20();
  EXPECT_EQ(model.name, "AQ-20");
  EXPECT_EQ(model.drive_mA, (PerBand<double>{20.0, 20.0}));
  EXPECT_EQ(model.quarter_drive_mA, (PerBand<double>{5.0, 5.0}));
  EXPECT_EQ(model.ceiling_mA, 25.0);
  expect_relative(model.slot_s, 439e-6, 1e-12);
  expect_relative(1.0 / model.cycle_s(), 569.476, 1e-6);  // the rate that keeps flicker away from the modulator
  EXPECT_EQ(model.pulse_cycles(), 352);                   // 342 cycles in 0.6 s, next multiple of 32
  EXPECT_EQ(model.set_points.size(), 3u);
  EXPECT_EQ(model.needed_set_points().size(), 3u);
  ASSERT_EQ(model.set_points_in_order().size(), 3u);
  EXPECT_EQ(model.set_points_in_order()[0].ratio, 0.4);
  EXPECT_EQ(model.set_points_in_order()[2].ratio, 1.0);  // the light's level, when the LEDs are warmest
  EXPECT_EQ(model.bins.size(), 5u);
  EXPECT_EQ(model.temperature.voltage_V_per_K.red, -0.002);
  EXPECT_NE(model.needs() & needs_closed_path, 0u);
  EXPECT_NE(model.needs() & needs_pulses, 0u);
  ASSERT_EQ(model.routine.size(), catalogue().size());
  for (std::size_t i = 0; i < catalogue().size(); ++i) EXPECT_EQ(model.routine[i], catalogue()[i].slug);
  expect_relative(model.pulses_after_s, 0.65, 1e-12);
}

TEST(Model, TheNeonatalWrapIsRead) {
  const Model model = read_model(text_of(source_path("configs/models/aq-35.yaml")), "aq-35.yaml").value();
  EXPECT_EQ(model.name, "AQ-35");
  EXPECT_EQ(model.wiring, Wiring::antiparallel);
  EXPECT_EQ(model.drive_mA, (PerBand<double>{10.0, 10.0}));
  EXPECT_EQ(model.routine.size(), catalogue().size() - 2);  // an antiparallel pair has no reverse leakage of its own
  EXPECT_FALSE(model.has_check("red_reverse_leakage"));
  EXPECT_FALSE(model.has_check("infrared_reverse_leakage"));
}

// Source: IEC 60063:2015, E96 series (tests/reference/iec60063_e96.csv).
TEST(Model, CodedResistorsAreE96ValuesFifteenPercentApart) {
  const auto series = reference::load("iec60063_e96.csv").numbers("value");
  const Model model = aq_20();
  for (std::size_t i = 0; i < model.bins.size(); ++i) {
    const double hundreds = model.bins[i].coded_ohm / 100.0;  // 10.2 kohm is 102
    EXPECT_NE(std::find(series.begin(), series.end(), std::round(hundreds)), series.end()) << hundreds;
    expect_relative(hundreds, std::round(hundreds), 1e-12);
    if (i > 0) EXPECT_GE(model.bins[i].coded_ohm / model.bins[i - 1].coded_ohm, 1.15);
  }
}

TEST(Model, AllFaultsAreToldAtOnceWithTheirPlaces) {
  std::string text = aq_20_text();
  text = replaced(text, "red: {drive: 20 mA}", "red: {drive: 30 mA}");
  text = replaced(text, "rate_Hz: 5", "rate_Hz: 50");
  text = replaced(text, "{ratio: 0.4, red: 1.0 %, infrared: 2.5 %}", "{ratio: 0.5, red: 1.0 %, infrared: 2.5 %}");
  text = replaced(text, "resistor: 11.8 kohm", "resistor: 11.0 kohm");
  text = replaced(text, "  - red_drive\n", "  - red_drve\n");
  text = replaced(text, "  - probe_present\n", "  - probe_present\n  - probe_present\n");
  text = replaced(text, "wiring: separate", "wiring: crossed");
  text = replaced(text, "frames: 4", "fames: 4");
  const auto model = read_model(text, "m.yaml");
  ASSERT_FALSE(model);
  EXPECT_EQ(ids(model.error()),
            (Ids{"model_bins_too_close", "model_check_twice", "model_drive_above_ceiling", "model_out_of_range",
                 "model_set_point_missing", "model_set_point_ratio", "model_unknown_check_near", "model_unknown_word",
                 "yaml_missing_key", "yaml_unknown_key_near"}));
  for (const Problem& problem : model.error()) EXPECT_EQ(problem.where.rfind("m.yaml:", 0), 0u) << problem.text();
}

TEST(Model, EachFaultHasItsName) {
  const std::string good = aq_20_text();
  const auto with = [&](const char* what, const char* instead) { return model_faults(replaced(good, what, instead)); };
  EXPECT_EQ(model_faults(good), Ids{});
  EXPECT_EQ(with("'AQ20-[0-9]{3}-[0-9]{5}'", "'AQ20-[0-9'"), Ids{"model_bad_pattern"});
  EXPECT_EQ(with("'09520000000202'", "'09520000000203'"), Ids{"model_bad_gtin"}) << "another check digit";
  EXPECT_EQ(with("'09520000000202'", "'0952000000020'"), Ids{"model_bad_gtin"}) << "the same digits, cut short";
  EXPECT_EQ(with("'09520000000202'", "AQ-20"), Ids{"model_bad_gtin"});
  EXPECT_EQ(with("'09520000000202'", "9520000000202"), Ids{}) << "13 digits without the leading zero are the same GTIN";
  EXPECT_EQ(with("gtin: '09520000000202'", "# none"), Ids{});
  EXPECT_EQ(with("capture: 0.6 s", "capture: 0.3 s"), Ids{"model_capture_short"});
  EXPECT_EQ(with("kind: resistor", "kind: chip"), Ids{"model_id_kind"});
  EXPECT_EQ(with("    - {ratio: 1.0, red: 1.0 %, infrared: 1.0 %}\n", ""),
            (Ids{"model_set_point_missing", "model_set_points_few"}));
  EXPECT_EQ(with("{ratio: 1.6, red: 1.6 %, infrared: 1.0 %}", "{ratio: 0.9, red: 0.9 %, infrared: 1.0 %}"),
            (Ids{"model_not_rising", "model_set_point_missing"}));
  EXPECT_EQ(with("  - id_resistance\n  - id_deviation\n", "  - id_deviation\n  - id_resistance\n"),
            Ids{"model_check_order"});
  EXPECT_EQ(with("    set_point: {u: 0.31 %, scope: common}", "    set_point: {scope: common}"),
            Ids{"model_budget_empty"});
  EXPECT_EQ(with("set_point: {u: 0.31 %, scope: common}", "set_point: {u: 0.31 %, scope: commn}"),
            Ids{"model_unknown_word"});
  EXPECT_EQ(with("set_point: {u: 0.31 %", "set_point: {u: 0.31 nm"), Ids{"unit_mismatch"});
  EXPECT_EQ(with("ceiling: 25 mA", "ceiling: 25 nm"),
            (Ids{"model_drive_above_ceiling", "model_drive_above_ceiling", "unit_mismatch"}));
  EXPECT_EQ(with("  ratio_deviation_1p0:\n", "  ratio_deviation_1p6:\n"),
            (Ids{"model_budget_missing", "yaml_duplicate_key"}));
}

TEST(Model, AModelMayMakeEveryCheckOfTheCatalogue) {
  const Model model = all_checks();
  ASSERT_EQ(model.routine.size(), catalogue().size());
  for (const Check& check : catalogue()) EXPECT_TRUE(model.has_check(check.slug)) << check.slug;
  EXPECT_EQ(model.needed_set_points().size(), 3u);
  EXPECT_EQ(model.level_set_point()->ratio, 1.0);
  EXPECT_EQ(model.cycles_for(model.ambient->capture_s), 64);
  EXPECT_EQ(model.saturation->curve.coefficients, (std::vector<double>{110.0, -25.0}));
  EXPECT_EQ(model.saturation->table, "haemoglobin_prahl");
  EXPECT_EQ(model.saturation->shape.red.width_nm, 19.0);
  EXPECT_TRUE(model.saturation->haemoglobin);
}

TEST(Model, TheLevelIsCapturedForChecksThatNeedNoSetPointOfTheirOwn) {
  Model model = all_checks();
  model.routine = {"red_transfer", "ratio_deviation_0p4"};
  ASSERT_EQ(model.needed_set_points().size(), 2u);
  EXPECT_EQ(model.needed_set_points()[1].ratio, 1.0);
  model.routine = {"ratio_deviation_1p6"};
  ASSERT_EQ(model.needed_set_points().size(), 1u);
  EXPECT_EQ(model.needed_set_points()[0].ratio, 1.6);
  model.routine = {"red_modulation_deviation"};
  EXPECT_EQ(model.needed_set_points().size(), 3u);
  model.routine = {"red_centroid"};
  EXPECT_TRUE(model.needed_set_points().empty());
}

TEST(Model, ACheckWithoutWhatItNeedsIsRefused) {
  const std::string good = all_checks_text();
  const auto with = [&](const std::string& what, const std::string& instead) {
    return model_faults(replaced(good, what, instead));
  };
  const auto cut = [&](const std::string& from, const std::string& to) {
    const auto a = good.find(from), b = good.find(to, a);
    return model_faults(std::string{good}.erase(a, b - a));
  };
  EXPECT_EQ(model_faults(good), Ids{});
  EXPECT_EQ(cut("ambient light:", "closed path:"), Ids{"model_section_missing"});
  EXPECT_EQ(cut("closed path:", "cross-talk:"), Ids{"model_section_missing"});
  EXPECT_EQ(cut("cross-talk:", "# The modelled saturation error"), Ids{"model_section_missing"});
  EXPECT_EQ(cut("saturation:\n", "\n# Standard uncertainties"), Ids(4, "model_section_missing"));
  EXPECT_EQ(with("warm-up: 1.5 s", "warm-up: 1.5 s\n  pulses after: 2 s"), Ids{"model_out_of_range"});
  EXPECT_EQ(cut("  - red_centroid\n", "  - infrared_centroid\n"), Ids{});  // its budget is enough
  EXPECT_EQ(with("    - {ratio: 0.4, red: 1.0 %, infrared: 2.5 %}\n", ""),
            (Ids{"model_set_point_missing", "model_set_points_few"}));
  EXPECT_EQ(with("[110, -25]", "[110, 25]"), Ids{"model_curve_not_falling"});
  EXPECT_EQ(with("[110, -25]", "[110]"), Ids{"model_curve_kind"});
  EXPECT_EQ(with("to ratio: 2.4", "to ratio: 1.4"), Ids{"model_curve_short"});
  EXPECT_EQ(with("from ratio: 0.2", "from ratio: 0.5"), Ids{"model_curve_short"});
  EXPECT_EQ(with("sha256: abce", "sha256: ABCE"), Ids{"model_bad_sha256"});
  EXPECT_EQ(with("width: 19.0 nm", "width: 0 nm"), Ids{"model_out_of_range"});
  EXPECT_EQ(with("skew: -0.15", "skew: -1.5"), Ids{"model_out_of_range"});
  EXPECT_EQ(with("flicker_Hz: 100", "flicker_Hz: 50"), Ids{"model_unknown_word"});
  EXPECT_EQ(with("lamp: 100 %", "lamp: 0 %"), Ids{"model_out_of_range"});
  EXPECT_EQ(with("nominal lines:", "nominal line:"), (Ids{"yaml_missing_key", "yaml_unknown_key_near"}));
  EXPECT_EQ(with("{nm: 1060, relative", "{nm: 560, relative"), Ids{"model_not_rising"});
}

TEST(Model, ACurveMayBeATable) {
  const std::string text = replaced(all_checks_text(), "{coefficients: [110, -25], from ratio: 0.2, to ratio: 2.4}",
                                    "{points: [{ratio: 0.2, saturation: 105 %}, {ratio: 1, saturation: 85 %}, "
                                    "{ratio: 2.4, saturation: 40 %}]}");
  const auto model = read_model(text, "m.yaml");
  ASSERT_TRUE(model) << model.error().front().text();
  expect_within(model->saturation->curve.saturation_at(0.6).value(), 95.0, 1e-12);
  expect_within(model->saturation->curve.ratio_at(85.0).value(), 1.0, 1e-12);
  EXPECT_EQ(model_faults(replaced(text, "ratio: 1,", "ratio: 0.2,")),
            (Ids{"model_curve_not_falling", "model_not_rising"}));
  EXPECT_EQ(
      model_faults(replaced(text, "{points:", "{coefficients: [110, -25], from ratio: 0.2, to ratio: 2, points:")),
      Ids{"model_curve_kind"});
}

TEST(Model, AHaemoglobinTableIsAttachedWhole) {
  Model model = read_model(all_checks_text(), "m.yaml").value();
  EXPECT_EQ(ids(attach_haemoglobin(model, "wavelength_nm,HbO2,Hb\n600,1,2\n800,1,1\n", "t.csv")),
            Ids{"model_table_short"});
  EXPECT_FALSE(attach_haemoglobin(model, "wavelength_nm,HbO2\n600,1\n", "t.csv").empty());
  EXPECT_FALSE(model.saturation->haemoglobin);
  Model plain = read_model(all_checks_text(), "m.yaml").value();
  plain.saturation.reset();
  EXPECT_TRUE(attach_haemoglobin(plain, "nothing", "t.csv").empty());
}

TEST(Model, ABrokenOrEmptyTextIsRefusedNotFatal) {
  for (const char* text : {"", "[]", "model", "model: {", "\xff\xfe", "a: b\na: c"})
    EXPECT_FALSE(read_model(text, "m.yaml")) << text;
  const std::string good = aq_20_text();
  for (std::size_t n = 0; n < good.find("\nroutine:"); n += 97)
    EXPECT_FALSE(read_model(good.substr(0, n), "m.yaml")) << n;
}

TEST(Certificate, TheDemonstrationsCertificatesAreRead) {
  for (const char* n : {"1", "2", "3", "4"}) {
    const std::string phantom_file = std::string{"configs/certificates/phantoms/PH-0"} + n + ".yaml";
    const std::string adapter_file = std::string{"configs/certificates/adapters/AD-0"} + n + ".yaml";
    const auto phantom = read_phantom_certificate(text_of(source_path(phantom_file)), phantom_file).value();
    const auto adapter = read_adapter_certificate(text_of(source_path(adapter_file)), adapter_file).value();
    EXPECT_EQ(phantom.head.number, std::string{"PHC-2026-010"} + n);
    EXPECT_EQ(phantom.head.device_serial, std::string{"PH-0"} + n);
    EXPECT_EQ(adapter.head.number, std::string{"ADC-2026-010"} + n);
    EXPECT_EQ(adapter.head.due, "2027-06-30");
    expect_relative(adapter.nA_per_code, 10000.0 / 8388608.0, 1e-13);
    ASSERT_NE(phantom.set_point(0.4), nullptr);
    EXPECT_EQ(phantom.set_point(0.4)->modulation, (PerBand<double>{0.010, 0.025}));
    EXPECT_EQ(phantom.set_point(0.7), nullptr);
  }
}

TEST(Certificate, EachFaultHasItsName) {
  const auto phantom = [](const char* what, const char* instead) {
    return phantom_faults(replaced(phantom_text(), what, instead));
  };
  const auto adapter = [](const char* what, const char* instead) {
    return adapter_faults(replaced(adapter_text(), what, instead));
  };
  EXPECT_EQ(phantom("device: phantom", "device: adapter"), Ids{"certificate_wrong_device"});
  EXPECT_EQ(phantom("'2027-06-30'", "'2027-02-30'"), Ids{"certificate_bad_date"});
  EXPECT_EQ(phantom("'2027-06-30'", "'30.6.2027'"), Ids{"certificate_bad_date"});
  EXPECT_EQ(phantom("[600.0, 0.4402, -2.0e-7, -1.0e-10]", "[600.0, 0.4402, -2.0e-3]"),
            Ids{"certificate_axis_not_rising"});
  EXPECT_EQ(phantom("[600.0, 0.4402, -2.0e-7, -1.0e-10]", "[600.0]"), Ids{"certificate_out_of_range"});
  EXPECT_EQ(phantom("{nm: 640,", "{nm: 660,"), (Ids{"certificate_axis_not_rising"}));
  EXPECT_EQ(phantom("{nm: 590,", "{nm: 604,"), (Ids{"certificate_axis_not_rising", "certificate_response_short"}));
  EXPECT_EQ(phantom("ratio: 1.6}", "ratio: 1.7}"), Ids{"certificate_ratio_differs"});
  EXPECT_EQ(phantom("offset: 0 K", "offset: 30 K"), Ids{"certificate_out_of_range"});
  EXPECT_EQ(adapter("drive: 1", "drive: 1.5"), Ids{"certificate_out_of_range"});
  EXPECT_EQ(adapter("nA_per_code: 0.00119209289550781", "nA_per_code: nan"), Ids{"number_not_finite"});
  EXPECT_EQ(adapter("R1: 10.000 kohm", "R1: -10 kohm"), Ids{"certificate_out_of_range"});
  EXPECT_EQ(adapter("resistance: 1", "resistanc: 1"), (Ids{"yaml_missing_key", "yaml_unknown_key_near"}));
}

TEST(Evaluate, MakesOnlyChecksOfTheCatalogueInItsOrder) {
  int before = -1;
  for (const std::string_view check : evaluated_checks()) {
    ASSERT_GE(check_index(check), 0) << check;
    EXPECT_GT(check_index(check), before) << check;
    before = check_index(check);
  }
}

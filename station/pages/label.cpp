#include "station/pages/label.h"

#include <algorithm>
#include <array>
#include <optional>
#include <string_view>

#include "station/base/numbers.h"
#include "station/pages/canvas.h"
#include "station/pages/gs1.h"

namespace probewright::pages {
namespace {

constexpr std::array<std::string_view, 8> purposes{"production", "engineering", "reference", "challenge",
                                                   "gauge",      "echo",        "training",  "return"};
constexpr std::size_t longest_text = 20;

std::optional<Problem> fault_of(LabelSize size) {
  const auto fits = [](double mm, double least, double most) { return mm >= least && mm <= most; };
  if (fits(size.width_mm, 20.0, 200.0) && fits(size.height_mm, 10.0, 200.0)) return std::nullopt;
  return Problem{"label_size", "", {{"width", shortest(size.width_mm)}, {"height", shortest(size.height_mm)}}};
}

std::optional<Problem> fault_of_copy(int copy) {
  if (copy >= 1 && copy <= 999) return std::nullopt;
  return Problem{"label_copy", "", {{"copy", std::to_string(copy)}}};
}

std::optional<Problem> fault_of_text(std::string_view what, std::string_view text) {
  const bool printable = std::all_of(text.begin(), text.end(), [](char c) { return c > ' ' && c <= '~'; });
  if (printable && !text.empty() && text.size() <= longest_text) return std::nullopt;
  return Problem{"label_text", "", {{"what", std::string{what}}, {"text", std::string{text}}}};
}

// Lengths of a GTIN-8, 12, 13 and 14.
bool like_gtin(std::string_view code) {
  const bool digits = std::all_of(code.begin(), code.end(), [](char c) { return c >= '0' && c <= '9'; });
  return digits && (code.size() == 8 || (code.size() >= 12 && code.size() <= 14));
}

std::optional<Problem> not_a_pass(const LabelRun& run) {
  if (run.verdict != "pass") return Problem{"label_not_passed", "", {{"verdict", run.verdict}}};
  if (run.purpose != "production") return Problem{"label_not_production", "", {{"purpose", run.purpose}}};
  return std::nullopt;
}

std::optional<Problem> not_a_fail(const LabelRun& run) {
  if (run.verdict != "fail") return Problem{"label_not_failed", "", {{"verdict", run.verdict}}};
  if (std::find(purposes.begin(), purposes.end(), run.purpose) == purposes.end())
    return Problem{"label_purpose_unknown", "", {{"purpose", run.purpose}}};
  return std::nullopt;
}

std::optional<Problem> fault_of(const PassLabel& wanted) {
  if (auto fault = not_a_pass(wanted.run)) return fault;
  if (auto fault = fault_of_copy(wanted.copy)) return fault;
  if (auto fault = fault_of_text("model", wanted.model)) return fault;
  if (auto fault = fault_of_text("serial", wanted.serial)) return fault;
  return fault_of_text("lot", wanted.lot);
}

std::optional<Problem> fault_of(const FailLabel& wanted) {
  if (auto fault = not_a_fail(wanted.run)) return fault;
  if (auto fault = fault_of_copy(wanted.copy)) return fault;
  if (auto fault = fault_of_text("internal code", wanted.internal_code)) return fault;
  if (like_gtin(wanted.internal_code)) return Problem{"label_code_like_gtin", "", {{"code", wanted.internal_code}}};
  return std::nullopt;
}

Result<gs1::Elements> elements_of(const PassLabel& wanted, const std::string& date) {
  auto gtin = gs1::gtin_14(wanted.gtin);
  if (gtin.has_error()) return gtin.error();
  if (wanted.run.emulated && !gs1::is_example(*gtin)) return Problem{"label_gtin_not_example", "", {{"gtin", *gtin}}};
  return gs1::Elements{*gtin, date, wanted.lot, wanted.serial};
}

}  // namespace

Result<Label> Label::of(const PassLabel& wanted, LabelSize size) {
  if (auto fault = fault_of(size)) return *fault;
  if (auto fault = pages::fault_of(wanted)) return *fault;
  const auto date = gs1::yymmdd(wanted.production_date);
  if (date.has_error()) return date.error();

  Label label;
  label.size_ = size;
  label.overprint_ = overprint_of(wanted.run.purpose, wanted.run.emulated);
  label.model_ = wanted.model;
  label.serial_ = wanted.serial;
  label.lot_ = wanted.lot;
  label.copy_ = wanted.copy;
  label.printed_ = wanted.printed;
  if (wanted.gtin.empty()) {
    label.kind_ = Kind::pass_with_serial;
    label.production_date_ = wanted.production_date;
    label.coded_ = wanted.serial;
    auto code = code_128(label.coded_);
    if (code.has_error()) return code.error();
    label.code_ = *code;
    return label;
  }
  const auto elements = elements_of(wanted, *date);
  if (elements.has_error()) return elements.error();
  const auto coded = gs1::element_string(*elements);
  if (coded.has_error()) return coded.error();
  auto code = gs1_data_matrix(gs1::bracketed(*elements, '[', ']').value());
  if (code.has_error()) return code.error();
  label.kind_ = Kind::pass_with_gtin;
  label.coded_ = *coded;
  label.gtin_ = elements->gtin;
  label.production_date_ = *date;
  label.code_ = *code;
  return label;
}

Result<Label> Label::of(const FailLabel& wanted, LabelSize size) {
  if (auto fault = fault_of(size)) return *fault;
  if (auto fault = pages::fault_of(wanted)) return *fault;
  auto code = code_128(wanted.internal_code);
  if (code.has_error()) return code.error();

  Label label;
  label.kind_ = Kind::fail;
  label.size_ = size;
  label.overprint_ = overprint_of(wanted.run.purpose, wanted.run.emulated);
  label.coded_ = wanted.internal_code;
  label.copy_ = wanted.copy;
  label.printed_ = wanted.printed;
  label.code_ = *code;
  return label;
}

}  // namespace probewright::pages

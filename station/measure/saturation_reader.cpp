#include "station/measure/saturation_reader.h"

#include <algorithm>

#include "station/base/numbers.h"
#include "station/measure/document_fields.h"

namespace probewright::measure {
namespace {

constexpr std::string_view out_of_range = "model_out_of_range";

std::vector<double> read_coefficients(const yaml::Value& value, yaml::Faults& faults) {
  std::vector<double> out;
  const auto list = value.list(faults);
  if (!list) return out;
  for (const yaml::Value& item : list->items()) out.push_back(item.number(faults).value_or(0.0));
  return out;
}

std::vector<Curve::Point> read_points(const yaml::Value& value, yaml::Faults& faults) {
  std::vector<Curve::Point> out;
  const auto list = value.list(faults);
  if (!list) return out;
  for (const yaml::Value& item : list->items()) {
    auto entry = item.map(faults);
    if (!entry) continue;
    Curve::Point point;
    point.ratio = fields::number(*entry, "ratio", {0.05, 5.0}, out_of_range, faults);
    point.saturation = fields::quantity(*entry, "saturation", "%", {-100.0, 200.0}, out_of_range, faults);
    entry->finish(faults);
    if (!out.empty() && !(point.ratio > out.back().ratio))
      faults.add(item.place(), "model_not_rising", {{"what", "ratios of the curve"}});
    out.push_back(point);
  }
  return out;
}

/// The curve must fall all the way and leave room for an error on both sides of 70 to 100 %.
void check_curve(const Curve& curve, yaml::Place place, yaml::Faults& faults) {
  constexpr double room = 2.0;
  if (!curve.falls()) return faults.add(place, "model_curve_not_falling");
  const double most = curve.saturation_at(curve.from_ratio).value(),
               least = curve.saturation_at(curve.to_ratio).value();
  if (most < 100.0 + room || least > 70.0 - room)
    faults.add(place, "model_curve_short", {{"from", fixed(least, 1)}, {"to", fixed(most, 1)}});
}

Curve read_curve(yaml::Map& map, yaml::Faults& faults) {
  Curve curve;
  auto part = fields::map(map, "curve", faults);
  if (!part) return curve;
  const yaml::Place place = part->place();
  const auto coefficients = part->maybe("coefficients"), points = part->maybe("points");
  if (coefficients) curve.coefficients = read_coefficients(*coefficients, faults);
  if (points) curve.points = read_points(*points, faults);
  if (coefficients) {
    curve.from_ratio = fields::number(*part, "from ratio", {0.05, 5.0}, out_of_range, faults);
    curve.to_ratio = fields::number(*part, "to ratio", {0.05, 5.0}, out_of_range, faults);
  } else if (!curve.points.empty()) {
    curve.from_ratio = curve.points.front().ratio, curve.to_ratio = curve.points.back().ratio;
  }
  part->finish(faults);
  const bool enough = coefficients ? curve.coefficients.size() >= 2 : curve.points.size() >= 2;
  if (coefficients.has_value() == points.has_value() || !enough)
    faults.add(place, "model_curve_kind");
  else
    check_curve(curve, place, faults);
  return curve;
}

LineShape read_shape(yaml::Map& lines, Band band, yaml::Faults& faults) {
  LineShape shape{1.0, 0.0};
  auto map = fields::map(lines, slug(band), faults);
  if (!map) return shape;
  shape.width_nm = fields::quantity(*map, "width", "nm", {2.0, 150.0}, out_of_range, faults);
  shape.skew = fields::number(*map, "skew", {-0.8, 0.8}, out_of_range, faults);
  map->finish(faults);
  return shape;
}

std::vector<ResponsePoint> read_responsivity(const yaml::Value& value, yaml::Faults& faults) {
  std::vector<ResponsePoint> out;
  const auto list = value.list(faults);
  if (!list) return out;
  for (const yaml::Value& item : list->items()) {
    auto entry = item.map(faults);
    if (!entry) continue;
    ResponsePoint point;
    point.wavelength_nm = fields::number(*entry, "nm", {300.0, 1200.0}, out_of_range, faults);
    point.relative = fields::number(*entry, "relative", {1e-3, 1e3}, out_of_range, faults);
    entry->finish(faults);
    if (!out.empty() && !(point.wavelength_nm > out.back().wavelength_nm))
      faults.add(item.place(), "model_not_rising", {{"what", "wavelengths of the responsivity"}});
    out.push_back(point);
  }
  return out;
}

bool is_sha256(std::string_view text) {
  constexpr std::string_view digits = "0123456789abcdef";
  return text.size() == 64 &&
         std::all_of(text.begin(), text.end(), [&](char c) { return digits.find(c) != std::string_view::npos; });
}

}  // namespace

SaturationModel read_saturation(yaml::Map& map, yaml::Faults& faults) {
  SaturationModel out;
  out.curve = read_curve(map, faults);
  if (auto table = fields::map(map, "haemoglobin", faults)) {
    out.table = fields::text(*table, "table", faults);
    out.table_sha256 = fields::text(*table, "sha256", faults);
    if (!out.table_sha256.empty() && !is_sha256(out.table_sha256))
      faults.add(fields::place_of(*table, "sha256"), "model_bad_sha256", {{"text", out.table_sha256}});
    table->finish(faults);
  }
  if (auto lines = fields::map(map, "nominal lines", faults)) {
    out.shape = {read_shape(*lines, Band::red, faults), read_shape(*lines, Band::infrared, faults)};
    lines->finish(faults);
  }
  if (const auto responsivity = map.maybe("responsivity")) out.responsivity = read_responsivity(*responsivity, faults);
  map.finish(faults);
  return out;
}

}  // namespace probewright::measure

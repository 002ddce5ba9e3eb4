#include "station/measure/certificate.h"

#include <algorithm>
#include <cmath>

#include "station/base/numbers.h"
#include "station/base/strict_yaml.h"
#include "station/base/times.h"
#include "station/measure/captures.h"
#include "station/measure/document_fields.h"

namespace probewright::measure {
namespace {

using fields::Range;
constexpr std::string_view out_of_range = "certificate_out_of_range";
constexpr Range scale_range{0.9, 1.1};

bool is_day(const std::string& text) { return text.size() == 10 && parse_utc(text + "T00:00:00Z").has_value(); }

CertificateHead read_head(yaml::Map& map, std::string_view device, yaml::Faults& faults) {
  CertificateHead head;
  head.number = fields::text(map, "certificate", faults);
  if (const std::string found = fields::text(map, "device", faults); !found.empty() && found != device)
    faults.add(fields::place_of(map, "device"), "certificate_wrong_device",
               {{"found", found}, {"wanted", std::string{device}}});
  head.device_serial = fields::text(map, "serial", faults);
  head.due = fields::text(map, "due", faults);
  if (!head.due.empty() && !is_day(head.due))
    faults.add(fields::place_of(map, "due"), "certificate_bad_date", {{"text", head.due}});
  head.issued_by = fields::text(map, "issued by", faults);
  return head;
}

double polynomial(const std::vector<double>& c, double x) {
  double sum = 0.0;
  for (auto k = c.rbegin(); k != c.rend(); ++k) sum = sum * x + *k;
  return sum;
}

/// Whether the axis rises over all pixels and stays where such a spectrometer can look.
bool is_good_axis(const std::vector<double>& c) {
  double before = polynomial(c, 0.0);
  if (!(before > 300.0)) return false;
  for (std::size_t pixel = 1; pixel < spectrometer_pixels; ++pixel) {
    const double nm = polynomial(c, static_cast<double>(pixel));
    if (!(nm > before)) return false;
    before = nm;
  }
  return before < 1200.0;
}

std::vector<double> read_wavelengths(yaml::Map& map, yaml::Faults& faults) {
  std::vector<double> coefficients;
  const auto list = fields::list(map, "wavelength_nm", faults);
  if (!list) return coefficients;
  const yaml::Place place = fields::place_of(map, "wavelength_nm");
  bool complete = true;
  for (const yaml::Value& item : list->items()) {
    const auto number = item.number(faults);
    complete = complete && number.has_value();
    coefficients.push_back(number.value_or(0.0));
  }
  if (!complete) return coefficients;
  if (coefficients.size() < 2 || coefficients.size() > 4)
    faults.add(place, out_of_range,
               {{"key", "wavelength_nm"},
                {"value", std::to_string(coefficients.size()) + " coefficients"},
                {"least", "2"},
                {"most", "4"}});
  else if (!is_good_axis(coefficients))
    faults.add(place, "certificate_axis_not_rising", {{"key", "wavelength_nm"}});
  return coefficients;
}

std::optional<ResponsePoint> read_point(const yaml::Value& item, yaml::Faults& faults) {
  auto map = item.map(faults);
  if (!map) return std::nullopt;
  ResponsePoint point;
  point.wavelength_nm = fields::number(*map, "nm", {300.0, 1200.0}, out_of_range, faults);
  point.relative = fields::number(*map, "relative", {1e-3, 1e3}, out_of_range, faults);
  map->finish(faults);
  return point;
}

std::vector<ResponsePoint> read_response(yaml::Map& map, const std::vector<double>& wavelengths, yaml::Faults& faults) {
  std::vector<ResponsePoint> table;
  const auto list = fields::list(map, "response", faults);
  if (!list) return table;
  for (const yaml::Value& item : list->items()) {
    const auto point = read_point(item, faults);
    if (!point) continue;
    if (!table.empty() && !(point->wavelength_nm > table.back().wavelength_nm))
      faults.add(item.place(), "certificate_axis_not_rising", {{"key", "response"}});
    table.push_back(*point);
  }
  const bool known_axis = wavelengths.size() >= 2 && is_good_axis(wavelengths);
  if (known_axis && (table.empty() || table.front().wavelength_nm > polynomial(wavelengths, 0.0) ||
                     table.back().wavelength_nm < polynomial(wavelengths, spectrometer_pixels - 1)))
    faults.add(fields::place_of(map, "response"), "certificate_response_short",
               {{"from", shortest(polynomial(wavelengths, 0.0))},
                {"to", shortest(polynomial(wavelengths, spectrometer_pixels - 1))}});
  return table;
}

std::vector<CalibratedSetPoint> read_set_points(yaml::Map& map, yaml::Faults& faults) {
  std::vector<CalibratedSetPoint> points;
  const auto list = fields::list(map, "set points", faults);
  if (!list) return points;
  for (const yaml::Value& item : list->items()) {
    auto entry = item.map(faults);
    if (!entry) continue;
    CalibratedSetPoint point;
    point.ratio_nominal = fields::number(*entry, "nominal", {0.1, 4.0}, out_of_range, faults);
    point.modulation.red = fields::quantity(*entry, "red", "%", {0.01, 20.0}, out_of_range, faults) / 100.0;
    point.modulation.infrared = fields::quantity(*entry, "infrared", "%", {0.01, 20.0}, out_of_range, faults) / 100.0;
    point.ratio = fields::number(*entry, "ratio", {0.1, 4.0}, out_of_range, faults);
    entry->finish(faults);
    if (std::abs(point.modulation.red / point.modulation.infrared / point.ratio - 1.0) > 0.01)
      faults.add(
          item.place(), "certificate_ratio_differs",
          {{"ratio", shortest(point.ratio)}, {"quotient", fixed(point.modulation.red / point.modulation.infrared, 4)}});
    points.push_back(point);
  }
  return points;
}

PhantomCertificate read_phantom(yaml::Map& map, yaml::Faults& faults) {
  PhantomCertificate out;
  out.head = read_head(map, "phantom", faults);
  if (auto part = fields::map(map, "spectrometer", faults)) {
    out.wavelength_nm = read_wavelengths(*part, faults);
    out.response = read_response(*part, out.wavelength_nm, faults);
    out.slit_nm = fields::quantity(*part, "slit", "nm", {0.0, 20.0}, out_of_range, faults);
    out.saturation_counts = fields::number(*part, "saturation_counts", {100.0, 65535.0}, out_of_range, faults);
    out.counts_per_electron = fields::number(*part, "counts_per_electron", {1e-4, 100.0}, out_of_range, faults);
    out.read_noise_counts = fields::number(*part, "read_noise_counts", {0.0, 1000.0}, out_of_range, faults);
    part->finish(faults);
  }
  if (auto part = fields::map(map, "thermometer", faults)) {
    out.temperature_offset_K = fields::quantity(*part, "offset", "K", {-5.0, 5.0}, out_of_range, faults);
    part->finish(faults);
  }
  out.set_points = read_set_points(map, faults);
  return out;
}

std::vector<ReferenceResistor> read_resistors(yaml::Map& map, yaml::Faults& faults) {
  std::vector<ReferenceResistor> out;
  auto part = fields::map(map, "reference resistors", faults);
  if (!part) return out;
  for (const auto& item : part->items()) {
    const double ohm = item.value.quantity("ohm", faults).value_or(1.0);
    if (!(ohm > 0.0 && ohm < 1e8))
      faults.add(item.value.place(), out_of_range,
                 {{"key", item.key}, {"value", shortest(ohm)}, {"least", "0"}, {"most", "100000000"}});
    out.push_back({item.key, ohm});
  }
  return out;
}

AdapterCertificate read_adapter(yaml::Map& map, yaml::Faults& faults) {
  AdapterCertificate out;
  out.head = read_head(map, "adapter", faults);
  out.nA_per_code = fields::number(map, "nA_per_code", {1e-6, 10.0}, out_of_range, faults);
  if (auto part = fields::map(map, "scales", faults)) {
    out.photocurrent_scale = fields::number(*part, "photocurrent", scale_range, out_of_range, faults);
    out.drive_scale = fields::number(*part, "drive", scale_range, out_of_range, faults);
    out.voltage_scale = fields::number(*part, "voltage", scale_range, out_of_range, faults);
    out.resistance_scale = fields::number(*part, "resistance", scale_range, out_of_range, faults);
    part->finish(faults);
  }
  out.reference_resistors = read_resistors(map, faults);
  return out;
}

template <class Certificate, class Reader>
ResultOrFaults<Certificate> read(std::string_view text, std::string_view file, Reader reader) {
  yaml::Faults faults{std::string{file}};
  const auto document = yaml::Document::read(text, faults);
  if (!document) return faults.take();
  auto map = document->root().map(faults);
  if (!map) return faults.take();
  Certificate out = reader(*map, faults);
  map->finish(faults);
  if (!faults.empty()) return faults.take();
  return out;
}

}  // namespace

const CalibratedSetPoint* PhantomCertificate::set_point(double ratio_nominal) const {
  const auto found = std::find_if(set_points.begin(), set_points.end(), [&](const CalibratedSetPoint& p) {
    return std::abs(p.ratio_nominal - ratio_nominal) < 1e-6;
  });
  return found == set_points.end() ? nullptr : &*found;
}

ResultOrFaults<PhantomCertificate> read_phantom_certificate(std::string_view text, std::string_view file) {
  return read<PhantomCertificate>(text, file, read_phantom);
}

ResultOrFaults<AdapterCertificate> read_adapter_certificate(std::string_view text, std::string_view file) {
  return read<AdapterCertificate>(text, file, read_adapter);
}

}  // namespace probewright::measure

#include "station/trace/drift.h"

#include <array>

namespace probewright::trace {
namespace {

struct Named {
  DriftOf of;
  std::string_view slug, unit;
};

constexpr std::array names = std::to_array<Named>({{DriftOf::wavelength, "wavelength", "nm"},
                                                   {DriftOf::temperature, "temperature", "K"},
                                                   {DriftOf::slit, "slit", "nm"},
                                                   {DriftOf::ratio, "ratio", "%"},
                                                   {DriftOf::modulation, "modulation", "%"},
                                                   {DriftOf::drive, "drive", "%"},
                                                   {DriftOf::photocurrent, "photocurrent", "%"},
                                                   {DriftOf::voltage, "voltage", "%"},
                                                   {DriftOf::resistance, "resistance", "%"}});

const Named& named(DriftOf of) { return names[static_cast<std::size_t>(of)]; }

void correct_set_points(measure::PhantomCertificate& phantom, DriftOf of, double factor) {
  for (measure::CalibratedSetPoint& point : phantom.set_points) {
    if (of == DriftOf::ratio) point.ratio /= factor;
    point.modulation.red /= factor;
    if (of == DriftOf::modulation) point.modulation.infrared /= factor;
  }
}

}  // namespace

std::string_view slug(DriftOf quantity) { return named(quantity).slug; }
std::string_view unit_of(DriftOf quantity) { return named(quantity).unit; }

std::optional<DriftOf> find_drift(std::string_view slug) {
  for (const Named& each : names)
    if (each.slug == slug) return each.of;
  return std::nullopt;
}

measure::Certificates corrected(const measure::Certificates& certificates, const Drift& drift) {
  measure::Certificates changed = certificates;
  measure::PhantomCertificate& phantom = changed.phantom;
  measure::AdapterCertificate& adapter = changed.adapter;
  const double factor = 1.0 + drift.too_high / 100.0;  // of those that are told in %
  switch (drift.of) {
    case DriftOf::wavelength:
      if (!phantom.wavelength_nm.empty()) phantom.wavelength_nm.front() -= drift.too_high;
      break;
    case DriftOf::temperature:
      phantom.temperature_offset_K += drift.too_high;
      break;
    case DriftOf::slit:
      phantom.slit_nm -= drift.too_high;
      break;
    case DriftOf::ratio:
    case DriftOf::modulation:
      correct_set_points(phantom, drift.of, factor);
      break;
    case DriftOf::drive:
      adapter.drive_scale /= factor;
      break;
    case DriftOf::photocurrent:
      adapter.photocurrent_scale /= factor;
      adapter.nA_per_code /= factor;
      break;
    case DriftOf::voltage:
      adapter.voltage_scale /= factor;
      break;
    case DriftOf::resistance:
      adapter.resistance_scale /= factor;
      break;
  }
  return changed;
}

}  // namespace probewright::trace

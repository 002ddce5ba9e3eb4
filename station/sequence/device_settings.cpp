#include "station/sequence/device_settings.h"

namespace probewright::sequence {
namespace {

wire::Expected expected_of(const measure::CertificateHead& head, const StationFile& station) {
  wire::Expected expected;
  expected.serial = head.device_serial;
  expected.certificate = head.number;
  expected.due = head.due;
  expected.emulated = station.emulated;
  return expected;
}

wire::LinkSettings link_of(const std::string& device, const StationFile& station) {
  wire::LinkSettings link;
  link.device = device;
  link.baud = station.baud;
  return link;
}

}  // namespace

std::string nest_name(int nest) { return "nest " + std::to_string(nest); }

phantom::Settings phantom_settings(const measure::PhantomCertificate& certificate, const StationFile& station,
                                   int nest) {
  phantom::Settings settings;
  settings.link = link_of("phantom of " + nest_name(nest), station);
  settings.expected = expected_of(certificate.head, station);
  settings.wavelength_nm = certificate.wavelength_nm;
  return settings;
}

adapter::Settings adapter_settings(const measure::AdapterCertificate& certificate, const StationFile& station,
                                   int nest) {
  adapter::Settings settings;
  settings.link = link_of("adapter of " + nest_name(nest), station);
  settings.expected = expected_of(certificate.head, station);
  return settings;
}

}  // namespace probewright::sequence

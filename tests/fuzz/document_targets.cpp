#include "drivers/emulated/scenario.h"
#include "limits/diagnosis/rules.h"
#include "limits/sheet.h"
#include "limits/signed_form.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"
#include "station/sequence/people_file.h"
#include "station/sequence/station_file.h"
#include "tests/fuzz/targets.h"

namespace probewright::fuzz {
namespace {

/// A document that is refused names its faults, each in words that the table has.
template <class Read>
auto read(const Read& reader, std::span<const std::byte> bytes) {
  auto document = reader(text_of(bytes), "document.yaml");
  if (!document) {
    require(!document.error().empty(), "a refusal has a reason");
    for (const Problem& problem : document.error())
      require(problem.text().find(problem.id) == std::string::npos || problem.id.find('_') == std::string::npos,
              "every reason has words");
  }
  return document;
}

}  // namespace

void station_file(std::span<const std::byte> bytes) { read(sequence::read_station_file, bytes); }
void people(std::span<const std::byte> bytes) { read(sequence::read_people_file, bytes); }
void model(std::span<const std::byte> bytes) { read(measure::read_model, bytes); }
void phantom_certificate(std::span<const std::byte> bytes) { read(measure::read_phantom_certificate, bytes); }
void adapter_certificate(std::span<const std::byte> bytes) { read(measure::read_adapter_certificate, bytes); }
void diagnosis(std::span<const std::byte> bytes) { read(limits::diagnosis::read_rules, bytes); }
void scenario(std::span<const std::byte> bytes) { read(emulated::read_scenario, bytes); }

void sheet(std::span<const std::byte> bytes) {
  const auto sheet = read(limits::read_sheet, bytes);
  if (!sheet) return;
  const std::string form = limits::signed_form(*sheet);
  const auto again = limits::read_sheet(form, "signed.yaml");
  require(again.has_value(), "the signed form of a sheet can be read");
  require(limits::signed_form(*again) == form, "and is the form of what was read");
}

}  // namespace probewright::fuzz

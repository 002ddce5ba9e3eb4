#include "station/text/plant_zone.h"

#include "db/queries/newest_document.h"
#include "station/sequence/configuration.h"

namespace probewright::text {
namespace {

std::optional<Zone> zone_named(const std::string& name) {
  auto zone = Zone::read(name);
  return zone ? std::optional{*std::move(zone)} : std::nullopt;
}

std::optional<Zone> zone_of_ledger(db::Reader& reader) {
  const auto document = db::newest_document(reader, "station");
  if (!document) return std::nullopt;
  const auto station = sequence::read_station_file(document->text, document->name);
  return station ? zone_named(station->zone) : std::nullopt;
}

std::optional<Zone> zone_of_choice(const StationChoice& choice) {
  const auto folder = sequence::find_configuration(choice.config, choice.installed);
  if (!folder) return std::nullopt;
  const auto station = sequence::read_station(*folder, choice.station);
  return station ? zone_named(station->value.zone) : std::nullopt;
}

}  // namespace

Zone plant_zone(db::Reader& reader, const StationChoice& choice, Console& console) {
  if (auto zone = zone_of_ledger(reader)) return *std::move(zone);
  if (auto zone = zone_of_choice(choice)) return *std::move(zone);
  console.warn({"zone_not_known", "ledger"});
  return {};
}

}  // namespace probewright::text

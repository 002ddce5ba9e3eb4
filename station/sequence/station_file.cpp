#include "station/sequence/station_file.h"

#include <unistd.h>

#include <algorithm>
#include <cstdlib>
#include <filesystem>
#include <set>

#include "station/base/numbers.h"
#include "station/base/strict_yaml.h"
#include "station/base/zone.h"

namespace probewright::sequence {
namespace {

constexpr int most_nests = 16;
constexpr unsigned bauds[] = {9600, 19200, 38400, 57600, 115200, 230400, 460800, 500000, 576000, 921600, 1000000};

/// Ports that were named already, so that one cable cannot stand for two devices.
using Seen = std::set<std::string>;

DevicePlace read_device(std::optional<yaml::Value> value, Seen& ports, yaml::Faults& faults) {
  DevicePlace place;
  if (!value) return place;
  auto map = value->map(faults);
  if (!map) return place;
  if (auto port = map->need("port", faults)) {
    place.port = port->text(faults).value_or("");
    if (!place.port.empty() && !ports.insert(place.port).second)
      faults.add(port->place(), "station_port_twice", {{"port", place.port}});
  }
  if (auto number = map->need("certificate", faults)) place.certificate = number->text(faults).value_or("");
  map->finish(faults);
  return place;
}

void read_nest(const yaml::Value& value, StationFile& station, Seen& ports, yaml::Faults& faults) {
  auto map = value.map(faults);
  if (!map) return;
  NestPlace nest;
  if (auto number = map->need("nest", faults)) {
    nest.nest = static_cast<int>(number->integer(faults).value_or(0));
    const bool twice = std::any_of(station.nests.begin(), station.nests.end(),
                                   [&](const NestPlace& other) { return other.nest == nest.nest; });
    if (nest.nest < 1 || nest.nest > most_nests)
      faults.add(number->place(), "station_nest_number", {{"bound", std::to_string(most_nests)}});
    else if (twice)
      faults.add(number->place(), "station_nest_twice", {{"nest", std::to_string(nest.nest)}});
  }
  nest.phantom = read_device(map->need("phantom", faults), ports, faults);
  nest.adapter = read_device(map->need("adapter", faults), ports, faults);
  map->finish(faults);
  station.nests.push_back(std::move(nest));
}

void read_nests(yaml::Map& map, StationFile& station, yaml::Faults& faults) {
  auto value = map.need("nests", faults);
  if (!value) return;
  auto list = value->list(faults);
  if (!list) return;
  Seen ports;
  for (const yaml::Value& nest : list->items()) read_nest(nest, station, ports, faults);
  if (station.nests.empty()) faults.add(value->place(), "station_no_nest");
  std::sort(station.nests.begin(), station.nests.end(),
            [](const NestPlace& a, const NestPlace& b) { return a.nest < b.nest; });
}

void read_bench(yaml::Map& map, StationFile& station, yaml::Faults& faults) {
  if (auto emulated = map.need("emulated", faults)) station.emulated = emulated->yes_no(faults).value_or(false);
  if (auto speed = map.maybe("speed")) {
    station.speed = speed->number(faults).value_or(1.0);
    const bool possible = station.speed >= 0.1 && station.speed <= 1000.0;
    if (!possible || (!station.emulated && station.speed != 1.0)) faults.add(speed->place(), "station_speed");
  }
  if (auto baud = map.maybe("baud")) {
    station.baud = static_cast<unsigned>(baud->integer(faults).value_or(station.baud));
    if (std::find(std::begin(bauds), std::end(bauds), station.baud) == std::end(bauds))
      faults.add(baud->place(), "station_baud", {{"baud", std::to_string(station.baud)}});
  }
}

std::string text_or(std::optional<yaml::Value> value, std::string_view fallback, yaml::Faults& faults) {
  if (!value) return std::string{fallback};
  return value->text(faults).value_or(std::string{fallback});
}

/// A name that can stand in paths, reports and labels.
bool plain_name(std::string_view name) {
  return !name.empty() && name.size() <= 40 && std::all_of(name.begin(), name.end(), [](unsigned char c) {
    return std::isalnum(c) || c == '-' || c == '_' || c == '.';
  }) && name.front() != '.';
}

std::string folder_of(const char* variable, const char* below_home) {
  if (const char* set = std::getenv(variable); set && *set) return set;
  const char* home = std::getenv("HOME");
  return (home && *home ? std::string{home} : std::filesystem::temp_directory_path().string()) + below_home;
}

}  // namespace

ResultOrFaults<StationFile> read_station_file(std::string_view text, std::string_view file) {
  yaml::Faults faults{std::string{file}};
  StationFile station;
  auto document = yaml::Document::read(text, faults);
  if (!document) return faults.take();
  if (auto map = document->root().map(faults)) {
    if (auto name = map->need("station", faults)) {
      station.station = name->text(faults).value_or("");
      if (!station.station.empty() && !plain_name(station.station)) faults.add(name->place(), "station_name");
    }
    if (auto zone = map->need("zone", faults)) {
      station.zone = zone->text(faults).value_or("");
      if (!station.zone.empty() && !Zone::read(station.zone))
        faults.add(zone->place(), "zone_unknown", {{"zone", station.zone}});
    }
    read_bench(*map, station, faults);
    station.ports_in = text_or(map->maybe("ports in"), "runtime", faults);
    station.ledger = text_or(map->maybe("ledger"), "default", faults);
    read_nests(*map, station, faults);
    map->finish(faults);
  }
  if (!faults.empty()) return faults.take();
  return station;
}

std::string runtime_port_folder() {
  if (const char* runtime = std::getenv("XDG_RUNTIME_DIR"); runtime && *runtime)
    return std::string{runtime} + "/probewright-bench";
  return (std::filesystem::temp_directory_path() / ("probewright-bench-" + std::to_string(::getuid()))).string();
}

std::string port_path(const StationFile& station, const DevicePlace& place, std::string_view folder_instead) {
  if (place.port.starts_with('/')) return place.port;
  std::string folder{folder_instead};
  if (folder.empty()) folder = station.ports_in == "runtime" ? runtime_port_folder() : station.ports_in;
  return folder + "/" + place.port;
}

std::string ledger_path(const StationFile& station) {
  if (station.ledger != "default") return station.ledger;
  return folder_of("XDG_DATA_HOME", "/.local/share") + "/probewright/" + station.station + "/ledger.db";
}

}  // namespace probewright::sequence

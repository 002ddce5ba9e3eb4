#include "station/text/demo_folder.h"

#include <cerrno>
#include <cstdlib>
#include <fstream>
#include <system_error>

#include "station/base/files.h"
#include "station/base/numbers.h"
#include "station/sequence/configuration.h"

namespace probewright::text {
namespace {

namespace fs = std::filesystem;
using sequence::NestPlace;
using sequence::StationFile;

constexpr std::size_t largest_truth_bytes = std::size_t{1} << 30;

Problem unusable(const fs::path& path, const std::string& reason) {
  return {"demo_folder", path.string(), {{"reason", reason}}};
}

fs::path state_folder() {
  if (const char* set = std::getenv("XDG_STATE_HOME"); set && *set) return set;
  const char* home = std::getenv("HOME");
  return (home && *home ? fs::path{home} : fs::temp_directory_path()) / ".local" / "state";
}

/// "demo-20261201T053612Z", and "-2" behind it where another one began in the same second.
fs::path new_folder(UtcTime now) {
  std::string name = "demo-" + to_text(now).substr(0, 19) + "Z";
  std::erase_if(name, [](char c) { return c == ':'; });
  const fs::path folder = state_folder() / "probewright" / name;
  fs::path path = folder;
  std::error_code ignored;
  for (int count = 2; fs::exists(path, ignored); ++count) path = folder.string() + "-" + std::to_string(count);
  return path;
}

Result<void> write(const fs::path& path, const std::string& text) {
  std::ofstream file{path, std::ios::binary | std::ios::trunc};
  file << text;
  file.close();
  if (!file) return unusable(path, std::error_code(errno, std::generic_category()).message());
  return {};
}

/// The truth of the lot is written once; where another one stands, another demonstration has been here.
Result<void> keep_truth(const DemoFolder& folder, const std::string& truth) {
  std::error_code ignored;
  if (!fs::exists(folder.truth(), ignored)) return write(folder.truth(), truth);
  const auto found = read_file(folder.truth(), largest_truth_bytes);
  if (!found) return found.error();
  if (*found != truth) return Problem{"demo_other_lot", folder.path.string()};
  return {};
}

Result<void> copy_configuration(const fs::path& from, const fs::path& to) {
  std::error_code error;
  if (fs::equivalent(from, to, error)) return {};
  fs::copy(from, to, fs::copy_options::recursive | fs::copy_options::overwrite_existing, error);
  if (!error) fs::remove_all(to / "stations", error);
  if (!error) fs::create_directories(to / "stations", error);
  if (error) return unusable(to, error.message());
  return {};
}

std::string device_text(const sequence::DevicePlace& place) {
  return "{port: " + place.port + ", certificate: " + place.certificate + "}";
}

/// YAML in single quotes, whatever stands in a path.
std::string quoted(const std::string& text) {
  std::string out = "'";
  for (const char c : text) out += c == '\'' ? std::string{"''"} : std::string{c};
  return out + "'";
}

}  // namespace

std::string station_text(const StationFile& station) {
  std::string text = "# The station of a demonstration, written by the command demo.\n";
  text += "station: " + station.station + "\nzone: " + station.zone + "\n";
  text += std::string{"emulated: "} + (station.emulated ? "yes" : "no") + "\n";
  text += "speed: " + shortest(station.speed) + "\nbaud: " + std::to_string(station.baud) + "\n";
  text += "ports in: " + quoted(station.ports_in) + "\nledger: " + quoted(station.ledger) + "\nnests:\n";
  for (const NestPlace& nest : station.nests)
    text += "  - nest: " + std::to_string(nest.nest) + "\n    phantom: " + device_text(nest.phantom) +
            "\n    adapter: " + device_text(nest.adapter) + "\n";
  return text;
}

ResultOrFaults<DemoFolder> make_demo_folder(const DemoOptions& options, const DemoParts& parts, UtcTime now) {
  const fs::path source = options.choice.config.empty() ? options.choice.installed : fs::path{options.choice.config};
  auto station = sequence::read_station(source, options.choice.station);
  if (!station) return station.error();
  DemoFolder folder{fs::absolute(options.out.empty() ? new_folder(now) : fs::path{options.out}).lexically_normal()};
  std::error_code error;
  fs::create_directories(folder.path, error);
  if (error) return Problems{unusable(folder.path, error.message())};
  if (auto kept = keep_truth(folder, parts.truth); !kept) return Problems{kept.error()};
  if (auto copied = copy_configuration(source, folder.configs()); !copied) return Problems{copied.error()};
  StationFile file = station->value;
  file.emulated = true;
  file.speed = options.speed;
  file.ports_in = folder.ports();
  file.ledger = folder.ledger();
  file.nests = parts.nests;
  const fs::path place = fs::path{folder.configs()} / "stations" / (file.station + ".yaml");
  if (auto written = write(place, station_text(file)); !written) return Problems{written.error()};
  return folder;
}

}  // namespace probewright::text

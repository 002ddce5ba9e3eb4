#include "station/text/ledger_file.h"

#include "station/sequence/configuration.h"

namespace probewright::text {

ResultOrFaults<std::string> ledger_file(const std::string& chosen, const StationChoice& choice) {
  if (!chosen.empty()) return chosen;
  const auto folder = sequence::find_configuration(choice.config, choice.installed);
  if (!folder) return Problems{folder.error()};
  const auto station = sequence::read_station(*folder, choice.station);
  if (!station) return station.error();
  return sequence::ledger_path(station->value);
}

}  // namespace probewright::text

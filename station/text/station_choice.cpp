#include "station/text/station_choice.h"

namespace probewright::text {

ResultOrFaults<sequence::Configuration> chosen_configuration(const StationChoice& choice, std::optional<double> speed) {
  const auto folder = sequence::find_configuration(choice.config, choice.installed);
  if (!folder) return Problems{folder.error()};
  auto configuration = sequence::read_configuration(*folder, choice.station);
  if (!configuration || !speed) return configuration;
  auto& station = configuration->station.value;
  if (*speed < 0.1 || *speed > 1000.0 || (!station.emulated && *speed != 1.0))
    return Problems{{"station_speed", "--speed"}};
  station.speed = *speed;
  return configuration;
}

}  // namespace probewright::text

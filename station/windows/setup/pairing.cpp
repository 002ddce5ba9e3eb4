#include "station/windows/setup/pairing.h"

#include <algorithm>
#include <map>

namespace probewright::windows {

using sequence::DeviceKind;
using sequence::FoundDevice;
using sequence::NestPlace;

namespace {

constexpr int most_nests = 16;

}  // namespace

int free_nest(const std::vector<Placed>& placed, const FoundDevice& device) {
  if (!device.kind) return 0;
  for (int nest = 1; nest <= most_nests; ++nest) {
    const bool taken = std::any_of(placed.begin(), placed.end(), [&](const Placed& other) {
      return other.nest == nest && other.device.kind == device.kind;
    });
    if (!taken) return nest;
  }
  return 0;
}

Result<std::vector<NestPlace>> nests_of(const std::vector<Placed>& placed) {
  std::map<int, NestPlace> nests;
  std::map<int, int> phantoms, adapters;
  for (const Placed& one : placed) {
    if (one.nest == 0 || !one.device.kind) continue;
    NestPlace& nest = nests[one.nest];
    nest.nest = one.nest;
    const bool phantom = *one.device.kind == DeviceKind::phantom;
    (phantom ? nest.phantom : nest.adapter) = {one.device.port, one.device.certificate};
    ++(phantom ? phantoms : adapters)[one.nest];
  }
  if (nests.empty()) return Problem{"setup_no_device", ""};
  std::vector<NestPlace> list;
  for (const auto& [number, nest] : nests) {
    if (phantoms[number] != 1 || adapters[number] != 1)
      return Problem{"setup_nest_incomplete",
                     "",
                     {{"nest", std::to_string(number)},
                      {"phantoms", std::to_string(phantoms[number])},
                      {"adapters", std::to_string(adapters[number])}}};
    list.push_back(nest);
  }
  return list;
}

}  // namespace probewright::windows

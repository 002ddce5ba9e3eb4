#pragma once
#include "station/base/strict_yaml.h"
#include "station/measure/saturation.h"

namespace probewright::measure {

/// The section `saturation` of a model file. Inside this folder only; faults as listed at read_model.
SaturationModel read_saturation(yaml::Map& map, yaml::Faults& faults);

}  // namespace probewright::measure

#include "station/windows/look/contrast.h"

#include <algorithm>
#include <cmath>

namespace probewright::windows {
namespace {

double linear(int channel) {
  const double part = channel / 255.0;
  return part <= 0.04045 ? part / 12.92 : std::pow((part + 0.055) / 1.055, 2.4);
}

}  // namespace

double relative_luminance(const QColor& colour) {
  return 0.2126 * linear(colour.red()) + 0.7152 * linear(colour.green()) + 0.0722 * linear(colour.blue());
}

double contrast(const QColor& one, const QColor& other) {
  const auto [darker, lighter] = std::minmax({relative_luminance(one), relative_luminance(other)});
  return (lighter + 0.05) / (darker + 0.05);
}

}  // namespace probewright::windows

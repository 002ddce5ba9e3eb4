#pragma once
#include <string_view>

namespace probewright::measure {

/// The two lights of a probe.
enum class Band { red, infrared };
/// "red" or "infrared"
constexpr std::string_view slug(Band band) { return band == Band::red ? "red" : "infrared"; }

/// One value for each band.
template <class T>
struct PerBand {
  T red{};
  T infrared{};
  const T& of(Band band) const { return band == Band::red ? red : infrared; }
  T& of(Band band) { return band == Band::red ? red : infrared; }
  bool operator==(const PerBand&) const = default;
};

}  // namespace probewright::measure

#pragma once
#include <cstddef>
#include <span>
#include <stdexcept>
#include <string>
#include <string_view>

// Every parser of bytes from outside, each as a function that takes any bytes. It must not crash, hang or read beyond
// them; where what it read can be written again, that must give the same.
namespace probewright::fuzz {

struct Target {
  std::string_view name;  ///< of its folder in corpus/, too
  void (*run)(std::span<const std::byte> bytes);
};
std::span<const Target> all_targets();

/// A promise of a parser, for any bytes. Throws std::logic_error.
inline void require(bool kept, const char* promise) {
  if (!kept) throw std::logic_error(promise);
}

inline std::string_view text_of(std::span<const std::byte> bytes) {
  return {reinterpret_cast<const char*>(bytes.data()), bytes.size()};
}

// wire_targets.cpp
void frames(std::span<const std::byte> bytes);
void cobs(std::span<const std::byte> bytes);
void lines(std::span<const std::byte> bytes);
void messages(std::span<const std::byte> bytes);
void blocks(std::span<const std::byte> bytes);
void answers(std::span<const std::byte> bytes);
void recordings(std::span<const std::byte> bytes);
void control(std::span<const std::byte> bytes);
// document_targets.cpp
void station_file(std::span<const std::byte> bytes);
void people(std::span<const std::byte> bytes);
void model(std::span<const std::byte> bytes);
void sheet(std::span<const std::byte> bytes);
void phantom_certificate(std::span<const std::byte> bytes);
void adapter_certificate(std::span<const std::byte> bytes);
void diagnosis(std::span<const std::byte> bytes);
void scenario(std::span<const std::byte> bytes);
// value_targets.cpp
void csv(std::span<const std::byte> bytes);
void bodies(std::span<const std::byte> bytes);
void captures(std::span<const std::byte> bytes);
void quantities(std::span<const std::byte> bytes);
void times(std::span<const std::byte> bytes);
void scans(std::span<const std::byte> bytes);

}  // namespace probewright::fuzz

#include "station/sequence/line_types.h"

#include <array>
#include <utility>

namespace probewright::sequence {
namespace {

constexpr std::array purposes = std::to_array<std::pair<Purpose, std::string_view>>({
    {Purpose::production, "production"},
    {Purpose::engineering, "engineering"},
    {Purpose::reference, "reference"},
    {Purpose::challenge, "challenge"},
    {Purpose::gauge, "gauge"},
    {Purpose::echo, "echo"},
    {Purpose::training, "training"},
    {Purpose::returned, "return"},
});

}  // namespace

std::string_view slug(Purpose purpose) {
  for (const auto& [value, word] : purposes)
    if (value == purpose) return word;
  return "engineering";
}

std::optional<Purpose> find_purpose(std::string_view wanted) {
  for (const auto& [value, word] : purposes)
    if (word == wanted) return value;
  return std::nullopt;
}

std::string_view slug(RunVerdict verdict) {
  switch (verdict) {
    case RunVerdict::pass:
      return "pass";
    case RunVerdict::fail:
      return "fail";
    case RunVerdict::void_run:
      return "void";
  }
  return "void";
}

std::string_view slug(NestState state) {
  switch (state) {
    case NestState::not_ready:
      return "not ready";
    case NestState::empty:
      return "empty";
    case NestState::occupied:
      return "occupied";
    case NestState::armed:
      return "armed";
    case NestState::running:
      return "running";
  }
  return "not ready";
}

}  // namespace probewright::sequence

#include "station/main_hands.h"

#include <filesystem>

#include "drivers/emulated/control_socket.h"
#include "station/sequence/station_file.h"

namespace probewright {
namespace {

Result<void> order(const std::string& socket, const std::string& command) {
  const auto reply = emulated::ask_bench(socket, command);
  if (!reply) return reply.error();
  if (*reply == "ok") return {};
  return Problem{"hands_refused", socket, {{"command", command}, {"reply", *reply}}};
}

template <class Options>
std::string socket_of(const Options& options) {
  if (!options.control.empty()) return options.control;
  return (options.ports.empty() ? sequence::runtime_port_folder() : options.ports) + "/control";
}

text::BenchHands hands_behind(const std::string& socket) {
  text::BenchHands hands;
  hands.seat = [socket](int nest, const std::string& serial) {
    return order(socket, "seat " + std::to_string(nest) + " " + serial);
  };
  hands.take_out = [socket](int nest) { return order(socket, "remove " + std::to_string(nest)); };
  return hands;
}

}  // namespace

std::optional<text::BenchHands> bench_hands(const text::TestOptions& options) {
  const std::string socket = socket_of(options);
  std::error_code ignored;
  if (!options.hands.value_or(std::filesystem::is_socket(socket, ignored))) return std::nullopt;
  return hands_behind(socket);
}

std::optional<text::BenchHands> bench_hands(const text::LineOptions& options) {
  if (!options.hands) return std::nullopt;
  return hands_behind(socket_of(options));
}

}  // namespace probewright

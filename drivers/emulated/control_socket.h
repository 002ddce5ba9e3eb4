#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <memory>
#include <string>

#include "drivers/emulated/hands.h"
#include "station/base/result.h"

namespace probewright::emulated {

/// Takes the commands of CONTROL.md on a local (Unix) stream socket, from any number of clients at a time, and lets the
/// hands do them. For this user only. Line thread only; the hands must outlive it.
class ControlSocket {
 public:
  /// Errors: bench_socket_taken (somebody answers there), bench_socket_failed. A socket that a killed bench left behind
  /// is replaced.
  static Result<std::unique_ptr<ControlSocket>> listen(boost::asio::any_io_executor executor, const std::string& path,
                                                       Hands& hands);
  /// Ends all connections and removes the socket.
  ~ControlSocket();

 private:
  struct Core;
  explicit ControlSocket(std::shared_ptr<Core> core) : core_(std::move(core)) {}
  std::shared_ptr<Core> core_;
};

/// Sends one command to a bench and waits for the reply ("ok" or a sentence), blocking, at most five seconds.
/// Errors: bench_socket_failed.
Result<std::string> ask_bench(const std::string& path, const std::string& command);

}  // namespace probewright::emulated

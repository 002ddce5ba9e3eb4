#include <sys/socket.h>
#include <sys/time.h>
#include <sys/un.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <cstring>
#include <system_error>

#include "drivers/emulated/control_socket.h"
#include "drivers/wire/owned_fd.h"

namespace probewright::emulated {
namespace {

Problem failed(const std::string& path, int error) {
  return {"bench_socket_failed", path, {{"reason", std::generic_category().message(error)}}};
}

bool send_all(int socket, std::string_view text) {
  while (!text.empty()) {
    const auto sent = ::send(socket, text.data(), text.size(), MSG_NOSIGNAL);
    if (sent <= 0) return false;
    text.remove_prefix(static_cast<std::size_t>(sent));
  }
  return true;
}

}  // namespace

Result<std::string> ask_bench(const std::string& path, const std::string& command) {
  sockaddr_un address{};
  if (path.size() >= sizeof address.sun_path) return failed(path, ENAMETOOLONG);
  address.sun_family = AF_UNIX;
  std::copy(path.begin(), path.end(), address.sun_path);
  wire::OwnedFd socket;
  socket.reset(::socket(AF_UNIX, SOCK_STREAM | SOCK_CLOEXEC, 0));
  if (!socket) return failed(path, errno);
  const timeval patience{5, 0};
  ::setsockopt(socket.get(), SOL_SOCKET, SO_RCVTIMEO, &patience, sizeof patience);
  ::setsockopt(socket.get(), SOL_SOCKET, SO_SNDTIMEO, &patience, sizeof patience);
  if (::connect(socket.get(), reinterpret_cast<const sockaddr*>(&address), sizeof address) != 0) {
    return failed(path, errno);
  }
  if (!send_all(socket.get(), command + "\n")) return failed(path, errno);
  std::string reply;
  while (reply.find('\n') == std::string::npos) {
    std::array<char, 256> piece{};
    const auto count = ::recv(socket.get(), piece.data(), piece.size(), 0);
    if (count <= 0) return failed(path, count == 0 ? ECONNRESET : errno);
    reply.append(piece.data(), static_cast<std::size_t>(count));
  }
  reply.resize(reply.find('\n'));
  return reply;
}

}  // namespace probewright::emulated

#include "drivers/emulated/control_socket.h"

#include <sys/stat.h>

#include <boost/asio/awaitable.hpp>
#include <boost/asio/buffer.hpp>
#include <boost/asio/co_spawn.hpp>
#include <boost/asio/local/stream_protocol.hpp>
#include <boost/asio/read_until.hpp>
#include <boost/asio/redirect_error.hpp>
#include <boost/asio/use_awaitable.hpp>
#include <boost/asio/write.hpp>
#include <filesystem>
#include <list>

#include "drivers/emulated/control_commands.h"

namespace probewright::emulated {
namespace {

using Local = asio::local::stream_protocol;
using boost::system::error_code;

constexpr std::size_t longest_command = 1024;

Problem failed(const std::string& path, const std::string& reason) {
  return {"bench_socket_failed", path, {{"reason", reason}}};
}

}  // namespace

struct ControlSocket::Core {
  Core(asio::any_io_executor executor, std::string socket_path, Hands& bench_hands)
      : acceptor(executor), path(std::move(socket_path)), hands(bench_hands) {}

  static asio::awaitable<void> accept_all(std::shared_ptr<Core> self);
  static asio::awaitable<void> serve(std::shared_ptr<Core> self, std::shared_ptr<Local::socket> client);
  void close();

  Local::acceptor acceptor;
  std::string path;
  Hands& hands;
  std::list<std::weak_ptr<Local::socket>> clients;
  bool closed = false;
};

asio::awaitable<void> ControlSocket::Core::accept_all(std::shared_ptr<Core> self) {
  while (!self->closed) {
    auto client = std::make_shared<Local::socket>(self->acceptor.get_executor());
    error_code error;
    co_await self->acceptor.async_accept(*client, asio::redirect_error(asio::use_awaitable, error));
    if (self->closed || error == asio::error::operation_aborted) co_return;
    if (error) continue;
    self->clients.remove_if([](const auto& known) { return known.expired(); });
    self->clients.push_back(client);
    asio::co_spawn(self->acceptor.get_executor(), serve(self, client), end_of_coroutine);
  }
}

asio::awaitable<void> ControlSocket::Core::serve(std::shared_ptr<Core> self, std::shared_ptr<Local::socket> client) {
  std::string held;
  while (true) {
    error_code error;
    const std::size_t count = co_await asio::async_read_until(*client, asio::dynamic_buffer(held, longest_command),
                                                              '\n', asio::redirect_error(asio::use_awaitable, error));
    if (error || self->closed) co_return;  // gone, or a line longer than any command
    const std::string reply = obey(self->hands, std::string_view(held).substr(0, count - 1)) + "\n";
    held.erase(0, count);
    co_await asio::async_write(*client, asio::buffer(reply), asio::redirect_error(asio::use_awaitable, error));
    if (error) co_return;
  }
}

void ControlSocket::Core::close() {
  closed = true;
  error_code ignored;
  acceptor.close(ignored);
  for (const auto& known : clients) {
    if (const auto client = known.lock()) client->close(ignored);
  }
  ::unlink(path.c_str());
}

Result<std::unique_ptr<ControlSocket>> ControlSocket::listen(asio::any_io_executor executor, const std::string& path,
                                                             Hands& hands) {
  if (path.size() >= sizeof(sockaddr_un::sun_path)) return failed(path, "the path is too long for a socket");
  std::error_code there;
  if (std::filesystem::is_socket(path, there)) {
    error_code error;
    Local::socket probe(executor);
    probe.connect(Local::endpoint(path), error);
    if (!error) return Problem{"bench_socket_taken", path};
    std::filesystem::remove(path, there);
  }
  auto core = std::make_shared<Core>(executor, path, hands);
  error_code error;
  core->acceptor.open(Local(), error);
  const ::mode_t before = ::umask(0177);  // this user alone may connect
  if (!error) core->acceptor.bind(Local::endpoint(path), error);
  ::umask(before);
  if (!error) core->acceptor.listen(asio::socket_base::max_listen_connections, error);
  if (error) return failed(path, error.message());
  asio::co_spawn(executor, Core::accept_all(core), end_of_coroutine);
  return std::unique_ptr<ControlSocket>(new ControlSocket(std::move(core)));
}

ControlSocket::~ControlSocket() { core_->close(); }

}  // namespace probewright::emulated

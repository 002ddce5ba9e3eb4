// What only real descriptors have: opening and its problems, links, stations that come and go.
#include "drivers/wire/serial_port.h"

#include <fcntl.h>
#include <gtest/gtest.h>
#include <stdlib.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <termios.h>
#include <unistd.h>

#include <filesystem>
#include <fstream>

#include "drivers/wire/owned_fd.h"
#include "drivers/wire/pty_master.h"
#include "tests/wire/line_trial.h"

namespace {

using namespace trial;
namespace fs = std::filesystem;

class Serial : public testing::Test {
 protected:
  Serial() {
    std::string pattern = (fs::temp_directory_path() / "probewright-XXXXXX").string();
    folder = ::mkdtemp(pattern.data());
  }
  ~Serial() override { fs::remove_all(folder); }

  Result<std::unique_ptr<wire::Port>> open(const std::string& path, int baud = 921600) {
    return wire::open_serial(line.io.get_executor(), line.clock(), path, baud);
  }
  std::unique_ptr<wire::PtyMaster> device(const std::string& link = {}) {
    return wire::PtyMaster::create(line.io.get_executor(), line.clock(), link).value();
  }

  RealLine line;
  std::string folder;
};

TEST_F(Serial, TellsWhyAPortCannotBeOpened) {
  EXPECT_EQ(open(folder + "/none").error().id, "port_missing");
  std::ofstream{folder + "/file"} << "x";
  EXPECT_EQ(open(folder + "/file").error().id, "port_not_a_tty");
  EXPECT_EQ(open(folder + "/file/below").error().id, "port_missing");
  EXPECT_EQ(open("/dev/null").error().id, "port_not_a_tty");
  const auto there = device();
  EXPECT_EQ(open(there->slave_path(), 12345).error().id, "port_baud");
  EXPECT_EQ(open(folder + "/none").error().where, folder + "/none");
  EXPECT_FALSE(open(folder + "/none").error().remedy().empty());
}

TEST_F(Serial, IsOpenedForOneOnly) {
  const auto there = device();
  auto first = open(there->slave_path());
  ASSERT_TRUE(first.has_value()) << first.error().text();
  EXPECT_EQ(open(there->slave_path()).error().id, "port_busy");
  first->reset();
  EXPECT_TRUE(open(there->slave_path()).has_value());
}

// The mark of TIOCEXCL stays on a pseudo-terminal when a station is killed while the bench goes on; an ordinary account
// could never open it again. The lock goes with its process.
TEST_F(Serial, CanBeOpenedAgainAfterAKilledStation) {
  const auto there = device();
  const pid_t station = ::fork();
  if (station == 0) {
    const auto port = open(there->slave_path());
    if (!port.has_value()) ::_exit(1);
    ::raise(SIGKILL);
  }
  int status = 0;
  ASSERT_EQ(::waitpid(station, &status, 0), station);
  ASSERT_TRUE(WIFSIGNALED(status) && WTERMSIG(status) == SIGKILL);
  if (::geteuid() == 0) {  // root may always open; look as somebody else
    ::chmod(there->slave_path().c_str(), 0666);
    const pid_t other = ::fork();
    if (other == 0) {
      if (::setuid(65534) != 0) ::_exit(2);
      ::_exit(open(there->slave_path()).has_value() ? 0 : 1);
    }
    ASSERT_EQ(::waitpid(other, &status, 0), other);
    EXPECT_TRUE(WIFEXITED(status));
    EXPECT_EQ(WEXITSTATUS(status), 0);
  }
  EXPECT_TRUE(open(there->slave_path()).has_value());
}

TEST_F(Serial, NamesMissingPermission) {
  if (::geteuid() != 0) {
    const auto there = device();
    ::chmod(there->slave_path().c_str(), 0);
    EXPECT_EQ(open(there->slave_path()).error().id, "port_permission");
    return;
  }
  const auto there = device();
  ::chmod(there->slave_path().c_str(), 0600);
  const pid_t other = ::fork();
  if (other == 0) {
    if (::setuid(65534) != 0) ::_exit(2);
    ::_exit(open(there->slave_path()).error().id == "port_permission" ? 0 : 1);
  }
  int status = 0;
  ASSERT_EQ(::waitpid(other, &status, 0), other);
  EXPECT_TRUE(WIFEXITED(status));
  EXPECT_EQ(WEXITSTATUS(status), 0);
}

TEST_F(Serial, IsRawWithoutFlowControlAtItsBaud) {
  const auto there = device();
  const auto port = open(there->slave_path(), 460800);
  ASSERT_TRUE(port.has_value());
  const wire::OwnedFd look{::open(there->slave_path().c_str(), O_RDWR | O_NOCTTY)};
  termios settings{};
  ASSERT_EQ(::tcgetattr(look.get(), &settings), 0);
  EXPECT_EQ(::cfgetospeed(&settings), speed_t{B460800});
  EXPECT_EQ(settings.c_cflag & CSIZE, tcflag_t{CS8});
  EXPECT_EQ(settings.c_cflag & (PARENB | CSTOPB | CRTSCTS), tcflag_t{0});
  EXPECT_EQ(settings.c_iflag & (IXON | IXOFF | ICRNL | INLCR | ISTRIP), tcflag_t{0});
  EXPECT_EQ(settings.c_lflag & (ICANON | ECHO | ISIG), tcflag_t{0});
  EXPECT_EQ(settings.c_oflag & OPOST, tcflag_t{0});
}

// Nothing may depend on who made the pseudo-terminal, nor on its settings before.
TEST_F(Serial, OpensAPseudoTerminalThatSomebodyElseMadeInCookedMode) {
  const wire::OwnedFd master{::posix_openpt(O_RDWR | O_NOCTTY)};
  ASSERT_EQ(::grantpt(master.get()), 0);
  ASSERT_EQ(::unlockpt(master.get()), 0);
  const auto port = open(::ptsname(master.get()));
  ASSERT_TRUE(port.has_value()) << port.error().text();
  const std::string_view sent{"\x03\r\n\x11\x13\x04\0z", 8};
  ASSERT_EQ(::write(master.get(), sent.data(), sent.size()), 8);
  line.run([&]() -> asio::awaitable<void> {
    const std::string text = co_await read_text(**port, 8, line.in(5s));
    EXPECT_EQ(text, sent);
    co_await (*port)->write_all(bytes_of(sent), line.in(5s));
  });
  std::array<char, 16> got{};
  ASSERT_EQ(::read(master.get(), got.data(), got.size()), 8);
  EXPECT_EQ(std::string_view(got.data(), 8), sent);
}

TEST_F(Serial, ThrowsAwayWhatStoodInTheLineBeforeItWasOpened) {
  const auto there = device();
  line.run([&]() -> asio::awaitable<void> {
    co_await there->write_all(bytes_of("stale"), line.in(5s));
    co_await line.clock().dwell(20ms);
    const auto port = open(there->slave_path()).value();
    co_await there->write_all(bytes_of("fresh"), line.in(5s));
    const std::string text = co_await read_text(*port, 5, line.in(5s));
    EXPECT_EQ(text, "fresh");
  });
}

TEST_F(Serial, TheDeviceGoesOnWhenStationsComeAndGo) {
  const auto there = device();
  line.run([&]() -> asio::awaitable<void> {
    for (int i = 0; i < 5; ++i) {
      const auto port = open(there->slave_path()).value();
      co_await port->write_all(bytes_of("ask"), line.in(5s));
      const std::string asked = co_await read_text(*there, 3, line.in(5s));
      EXPECT_EQ(asked, "ask");
      co_await there->write_all(bytes_of("answer"), line.in(5s));
      const std::string answer = co_await read_text(*port, 6, line.in(5s));
      EXPECT_EQ(answer, "answer");
    }
  });
}

TEST_F(Serial, DrainWaitsUntilTheLastBytesWereRead) {
  for (const std::size_t size : {1u, 100u, 9000u}) {
    auto there = device();
    const auto port = open(there->slave_path()).value();
    const Bytes last(size, std::byte{'x'});
    Bytes got;
    const auto reader = line.start([&]() -> asio::awaitable<void> {
      co_await line.clock().dwell(30ms);
      got = co_await read_exactly(*port, size, line.in(5s));
    });
    line.run([&]() -> asio::awaitable<void> {
      co_await there->write_all(last, line.in(5s));
      co_await there->drain(line.in(5s));
      there->close();
    });
    EXPECT_TRUE(line.run_until_done(*reader));
    EXPECT_EQ(reader->end(), "");
    EXPECT_EQ(got, last);
  }
  auto there = device();
  const auto port = open(there->slave_path()).value();
  const auto drained = line.start([&]() -> asio::awaitable<void> {
    co_await there->write_all(bytes_of("unread"), line.in(5s));
    co_await there->drain(line.in(100ms));
  });
  EXPECT_TRUE(line.run_until_done(*drained));
  EXPECT_EQ(drained->end(), "deadline passed");
}

TEST_F(Serial, LinksPointToTheSlaveAndGoWithIt) {
  const std::string link = folder + "/phantom-1";
  auto first = device(link);
  EXPECT_EQ(fs::read_symlink(link), first->slave_path());
  EXPECT_EQ(first->name(), link);
  EXPECT_TRUE(open(link).has_value());
  auto second = device(link);  // replugged: the new one takes the link over
  EXPECT_EQ(fs::read_symlink(link), second->slave_path());
  first.reset();  // and the old one leaves it alone
  EXPECT_EQ(fs::read_symlink(link), second->slave_path());
  second.reset();
  EXPECT_FALSE(fs::exists(fs::symlink_status(link)));
  std::ofstream{folder + "/file"} << "mine";
  const auto in_the_way = wire::PtyMaster::create(line.io.get_executor(), line.clock(), folder + "/file");
  EXPECT_EQ(in_the_way.error().id, "pty_link_failed");
  const auto no_folder = wire::PtyMaster::create(line.io.get_executor(), line.clock(), folder + "/no/link");
  EXPECT_EQ(no_folder.error().id, "pty_link_failed");
}

TEST_F(Serial, APortMayGoWhileItsReadWaits) {
  const auto there = device();
  auto port = open(there->slave_path()).value();
  const auto reader = line.start([&]() -> asio::awaitable<void> { co_await read_exactly(*port, 1, line.in(3600s)); });
  line.run([&]() -> asio::awaitable<void> {
    co_await line.clock().dwell(5ms);
    port.reset();
  });
  EXPECT_TRUE(line.run_until_done(*reader));
  EXPECT_EQ(reader->end(), "port lost");
}

// Sixteen nests on one thread: one device babbles without end, the others are silent; no deadline may slip by it.
TEST_F(Serial, ABabblingDeviceDelaysNobodysDeadline) {
  constexpr int nests = 16;
  std::vector<std::unique_ptr<wire::PtyMaster>> devices;
  std::vector<std::unique_ptr<wire::Port>> ports;
  std::vector<Duration> late(nests, Duration::max());
  std::vector<std::shared_ptr<Started>> readers;
  for (int nest = 0; nest < nests; ++nest) {
    devices.push_back(device());
    ports.push_back(open(devices.back()->slave_path()).value());
  }
  const Bytes noise(4096, std::byte{0x55});
  const auto babble = line.start([&]() -> asio::awaitable<void> {
    while (true) co_await devices[0]->write_all(noise, line.in(3600s));
  });
  for (std::size_t nest = 0; nest < nests; ++nest)
    readers.push_back(line.start([&, nest]() -> asio::awaitable<void> {
      const auto deadline = line.in(150ms);
      std::array<std::byte, 512> into{};
      try {
        while (true) co_await ports[nest]->read_some(into, deadline);
      } catch (const wire::DeadlinePassed&) {
        late[nest] = line.clock().steady_now() - deadline;
      }
    }));
  for (const auto& reader : readers) EXPECT_TRUE(line.run_until_done(*reader));
  for (const Duration by : late) {
    EXPECT_GE(by, 0ns);
    EXPECT_LT(by, 400ms);
  }
  devices[0]->close();
  EXPECT_TRUE(line.run_until_done(*babble));
  EXPECT_EQ(babble->end(), "port lost");
}

}  // namespace

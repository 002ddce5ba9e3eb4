#include <fcntl.h>
#include <gtest/gtest.h>
#include <poll.h>
#include <sys/socket.h>
#include <sys/stat.h>
#include <sys/un.h>
#include <termios.h>
#include <unistd.h>

#include <atomic>
#include <csignal>
#include <cstring>
#include <filesystem>
#include <fstream>
#include <future>
#include <nlohmann/json.hpp>
#include <sstream>
#include <thread>

#include "drivers/emulated/bench_thread.h"
#include "drivers/emulated/control_socket.h"
#include "drivers/emulated/run_bench.h"
#include "drivers/wire/owned_fd.h"

// Real time, real pseudo-terminals, a real socket. Nothing here asserts how fast anything is.
namespace probewright::emulated {
namespace {

namespace fs = std::filesystem;

class Folder {
 public:
  Folder() {
    std::string form = (fs::temp_directory_path() / "bench-XXXXXX").string();
    path_ = ::mkdtemp(form.data());
  }
  ~Folder() { fs::remove_all(path_); }
  std::string operator/(const std::string& name) const { return (fs::path(path_) / name).string(); }
  const std::string& path() const { return path_; }

 private:
  std::string path_;
};

/// What run_bench prints, readable while it runs.
class Output : public std::stringbuf {
 public:
  std::future<void> ready() { return ready_.get_future(); }
  int sync() override {
    if (!told_ && str().find("ready\n") != std::string::npos) {
      told_ = true;
      ready_.set_value();
    }
    return 0;
  }

 private:
  std::promise<void> ready_;
  bool told_ = false;
};

/// A bench in a thread of its own until the test ends.
class RunningBench {
 public:
  explicit RunningBench(RunBenchOptions options) : options_(std::move(options)) {
    auto ready = output_.ready();
    thread_ = std::thread([this] {
      std::ostream out(&output_);
      result_ = run_bench(options_, out);
      done_.set_value();
    });
    up_ = ready.wait_for(std::chrono::seconds(20)) == std::future_status::ready;
    EXPECT_TRUE(up_);
  }
  ~RunningBench() { stop(); }
  /// SIGTERM, as a person would end it.
  void stop() {
    if (!thread_.joinable()) return;
    if (up_) ::kill(::getpid(), SIGTERM);
    thread_.join();
    EXPECT_TRUE(result_) << (result_ ? std::string{} : result_.error().text());
  }
  std::string printed() const { return output_.str(); }
  std::string tell(const std::string& command) const {
    const auto reply = ask_bench((fs::path(options_.folder) / "control").string(), command);
    return reply ? *reply : reply.error().text();
  }

 private:
  RunBenchOptions options_;
  Output output_;
  std::thread thread_;
  std::promise<void> done_;
  bool up_ = false;
  Result<void> result_;
};

/// A serial line as any program opens one: nothing of this project in it but the file descriptor's owner.
class PlainTty {
 public:
  explicit PlainTty(const std::string& path) : fd_(::open(path.c_str(), O_RDWR | O_NOCTTY)) {
    termios settings{};
    if (::tcgetattr(fd_.get(), &settings) == 0) {
      ::cfmakeraw(&settings);
      ::tcsetattr(fd_.get(), TCSANOW, &settings);
    }
  }
  bool open() const { return static_cast<bool>(fd_); }
  void send(std::string_view text) { ASSERT_EQ(::write(fd_.get(), text.data(), text.size()), ssize_t(text.size())); }
  /// Reads until `text` ends in `end` or five seconds are over.
  std::string read_to(char end) {
    std::string text;
    while (text.empty() || text.back() != end) {
      pollfd waiting{fd_.get(), POLLIN, 0};
      if (::poll(&waiting, 1, 5000) <= 0) break;
      char byte = 0;
      if (::read(fd_.get(), &byte, 1) != 1) break;
      text.push_back(byte);
    }
    return text;
  }
  std::string ask(const std::string& line) {
    send(line + "\n");
    return read_to('\n');
  }

 private:
  wire::OwnedFd fd_;
};

RunBenchOptions options_in(const Folder& folder) {
  RunBenchOptions options;
  options.bench.speed = 20.0;
  options.bench.perfect = true;
  options.bench.nests = 2;
  options.folder = folder.path();
  return options;
}

TEST(Hosting, PseudoTerminalsControlSocketAndTruthFile) {
  Folder folder;
  RunBenchOptions options = options_in(folder);
  options.truth_file = folder / "truth.json";
  options.seats = {"2:AQ35-048-00001"};
  RunningBench bench(options);
  for (const char* line : {"nest1-phantom ", "nest1-adapter ", "nest2-phantom ", "nest2-adapter ", "control "}) {
    EXPECT_NE(bench.printed().find(line), std::string::npos) << line;
  }
  PlainTty phantom(folder / "nest1-phantom"), second(folder / "nest2-phantom"), adapter(folder / "nest1-adapter");
  ASSERT_TRUE(phantom.open() && second.open() && adapter.open());
  EXPECT_EQ(phantom.ask("*IDN?"), "Alder Quay Sensors,PHANTOM,PH-01,1.0.0-emulated-x20\n");
  EXPECT_EQ(second.ask("PROB?"), "1\n");
  EXPECT_EQ(phantom.ask("PROB?"), "0\n");
  EXPECT_EQ(bench.tell("seat 1 AQ20-048-00001"), "ok");
  EXPECT_EQ(phantom.ask("PROB?;PROB:COUN?"), "1;1\n");
  // Presence, sequence 1; bytes made apart from this program.
  adapter.send(std::string_view("\x03\x09\x01\x03\x3c\x61\x00", 7));
  EXPECT_EQ(adapter.read_to('\0'), std::string_view("\x03\x89\x01\x03\x01\x01\x01\x01\x03\x32\xf1\x00", 12));
  EXPECT_EQ(phantom.ask("SPEC:EXP 10 ms;AVER 2;SHUT CLOS;SHUT?"), "CLOS\n");
  std::ifstream file(options.truth_file);
  const auto truth = nlohmann::json::parse(file);
  EXPECT_TRUE(truth["probes"].contains("AQ20-048-00001"));
  EXPECT_TRUE(truth["probes"].contains("AQ35-048-00001"));
  bench.stop();
  EXPECT_FALSE(fs::exists(fs::symlink_status(folder / "nest1-phantom")));
  EXPECT_FALSE(fs::exists(folder / "control"));
}

// For a program that runs bench and station: the ports are the same pseudo-terminals, the hands are lent.
TEST(Hosting, ABenchInAThreadOfItsOwnLendsItsHands) {
  Folder folder;
  auto bench = BenchThread::start(options_in(folder));
  ASSERT_TRUE(bench) << bench.error().text();
  PlainTty phantom(folder / "nest1-phantom");
  EXPECT_EQ(phantom.ask("PROB?"), "0\n");
  const auto seat = [&](const char* serial) {
    return (*bench)->with_hands([serial](Hands& hands) { return hands.seat(1, serial, "AQ-20"); });
  };
  EXPECT_TRUE(seat("AQ20-048-00001"));
  EXPECT_EQ(phantom.ask("PROB?"), "1\n");
  const auto again = seat("AQ20-048-00002");
  ASSERT_FALSE(again);
  EXPECT_EQ(again.error().id, "bench_nest_occupied");
  EXPECT_FALSE(fs::exists(folder / "control"));
  bench->reset();
  EXPECT_FALSE(fs::exists(fs::symlink_status(folder / "nest1-phantom")));
  RunBenchOptions impossible = options_in(folder);
  impossible.bench.nests = 17;
  EXPECT_EQ(BenchThread::start(impossible).error().id, "bench_options");
}

TEST(Hosting, PulledCableTakesThePortAwayAndPluggingBringsItBack) {
  Folder folder;
  RunningBench bench(options_in(folder));
  PlainTty phantom(folder / "nest1-phantom");
  EXPECT_EQ(phantom.ask("SPEC:AVER 5;AVER?"), "5\n");
  EXPECT_EQ(bench.tell("pull nest1-phantom"), "ok");
  EXPECT_FALSE(fs::exists(folder / "nest1-phantom"));
  EXPECT_EQ(bench.tell("plug nest1-phantom"), "ok");
  PlainTty again(folder / "nest1-phantom");
  EXPECT_EQ(again.ask("SPEC:AVER?"), "5\n");
}

TEST(Hosting, StationMayCloseAndOpenAgain) {
  Folder folder;
  RunningBench bench(options_in(folder));
  for (int i = 0; i < 3; ++i) {
    PlainTty phantom(folder / "nest1-phantom");
    EXPECT_EQ(phantom.ask("LID?"), "CLOS\n") << i;
  }
}

/// A pair of joined pseudo-terminals made by somebody else: bytes are carried between two masters.
class JoinedTtys {
 public:
  JoinedTtys(const std::string& device_link, const std::string& station_link) {
    for (auto [master, link] : {std::pair{&device_, &device_link}, {&station_, &station_link}}) {
      master->reset(::posix_openpt(O_RDWR | O_NOCTTY));
      ::grantpt(master->get());
      ::unlockpt(master->get());
      const std::string slave = ::ptsname(master->get());
      holders_.emplace_back(::open(slave.c_str(), O_RDWR | O_NOCTTY));
      termios settings{};
      ::tcgetattr(holders_.back().get(), &settings);
      ::cfmakeraw(&settings);
      ::tcsetattr(holders_.back().get(), TCSANOW, &settings);
      fs::create_symlink(slave, *link);
    }
    carrier_ = std::thread([this] { carry(); });
  }
  ~JoinedTtys() {
    stop_ = true;
    carrier_.join();
  }

 private:
  void carry() {
    while (!stop_) {
      pollfd waiting[2] = {{device_.get(), POLLIN, 0}, {station_.get(), POLLIN, 0}};
      if (::poll(waiting, 2, 50) <= 0) continue;
      for (int i = 0; i < 2; ++i) {
        if ((waiting[i].revents & POLLIN) == 0) continue;
        char bytes[512];
        const auto count = ::read(waiting[i].fd, bytes, sizeof bytes);
        if (count > 0 && ::write(waiting[1 - i].fd, bytes, static_cast<std::size_t>(count)) != count) return;
      }
    }
  }
  wire::OwnedFd device_, station_;
  std::vector<wire::OwnedFd> holders_;
  std::atomic<bool> stop_ = false;
  std::thread carrier_;
};

TEST(Hosting, TakesOverTtysThatOthersMade) {
  Folder folder, ttys;
  JoinedTtys phantom_line(ttys / "nest1-phantom", ttys / "station-phantom");
  JoinedTtys adapter_line(ttys / "nest1-adapter", ttys / "station-adapter");
  RunBenchOptions options = options_in(folder);
  options.bench.nests = 1;
  options.attach = ttys.path();
  RunningBench bench(options);
  PlainTty phantom(ttys / "station-phantom");
  EXPECT_EQ(phantom.ask("*IDN?"), "Alder Quay Sensors,PHANTOM,PH-01,1.0.0-emulated-x20\n");
}

TEST(Hosting, RefusesWhatCannotBe) {
  Folder folder;
  std::ostringstream out;
  const auto problem_with = [&](auto change) {
    RunBenchOptions options = options_in(folder);
    change(options);
    const auto result = run_bench(options, out);
    return result ? std::string("none") : result.error().id;
  };
  EXPECT_EQ(problem_with([](RunBenchOptions& o) { o.bench.nests = 0; }), "bench_options");
  EXPECT_EQ(problem_with([](RunBenchOptions& o) { o.bench.nests = 17; }), "bench_options");
  EXPECT_EQ(problem_with([](RunBenchOptions& o) { o.bench.speed = 0.0; }), "bench_options");
  EXPECT_EQ(problem_with([](RunBenchOptions& o) { o.folder.clear(); }), "bench_options");
  EXPECT_EQ(problem_with([](RunBenchOptions& o) { o.seats = {"AQ20-048-00001"}; }), "bench_options");
  EXPECT_EQ(problem_with([](RunBenchOptions& o) { o.seats = {"5:AQ20-048-00001"}; }), "bench_no_such_nest");
  EXPECT_EQ(problem_with([](RunBenchOptions& o) { o.seats = {"1:ZZ-00001"}; }), "bench_unknown_model");
  EXPECT_EQ(problem_with([](RunBenchOptions& o) { o.truth_file = "/no/such/folder/truth.json"; }),
            "bench_truth_unwritable");
  EXPECT_EQ(problem_with([](RunBenchOptions& o) { o.attach = "/no/such/folder"; }), "port_missing");
  std::ofstream(folder / "file") << "x";
  EXPECT_EQ(problem_with([&](RunBenchOptions& o) { o.folder = folder / "file"; }), "bench_folder");
}

TEST(ControlSocketReal, TwoClientsManyCommandsAndNoSecondBench) {
  Folder folder;
  RunningBench bench(options_in(folder));
  const std::string path = folder / "control";
  struct stat status {};
  ASSERT_EQ(::stat(path.c_str(), &status), 0);
  EXPECT_EQ(status.st_mode & 0777u, 0600u);
  EXPECT_EQ(bench.tell("seat 1 AQ20-048-00001"), "ok");
  EXPECT_EQ(bench.tell("seat 1 AQ20-048-00002"), "the probe AQ20-048-00001 sits in nest 1 (take it out first)");
  EXPECT_EQ(bench.tell("remove 1\nremove 1"), "ok");  // the first reply; the second command runs all the same
  EXPECT_EQ(bench.tell("remove 1").substr(0, 15), "nest 1 is empty");
  std::ostringstream out;
  RunBenchOptions second = options_in(folder);
  Folder elsewhere;
  second.folder = elsewhere.path();
  second.control = path;
  EXPECT_EQ(run_bench(second, out).error().id, "bench_socket_taken");
  EXPECT_EQ(bench.tell("lid 1 open"), "ok");  // the first bench goes on
  const auto nobody = ask_bench(folder / "nothing", "lid 1 open");
  ASSERT_FALSE(nobody);
  EXPECT_EQ(nobody.error().id, "bench_socket_failed");
}

TEST(ControlSocketReal, ReplacesASocketThatAKilledBenchLeftBehind) {
  Folder folder;
  sockaddr_un address{};
  address.sun_family = AF_UNIX;
  std::strncpy(address.sun_path, (folder / "control").c_str(), sizeof address.sun_path - 1);
  {
    const wire::OwnedFd dead(::socket(AF_UNIX, SOCK_STREAM, 0));
    ASSERT_EQ(::bind(dead.get(), reinterpret_cast<const sockaddr*>(&address), sizeof address), 0);
  }
  ASSERT_TRUE(fs::exists(folder / "control"));
  RunningBench bench(options_in(folder));
  EXPECT_EQ(bench.tell("lid 1 open"), "ok");
}

}  // namespace
}  // namespace probewright::emulated

#include "program.h"

#include <fcntl.h>
#include <signal.h>
#include <spawn.h>
#include <sys/wait.h>
#include <unistd.h>

#include <chrono>
#include <fstream>
#include <sstream>
#include <stdexcept>
#include <thread>

namespace program {
namespace {

namespace fs = std::filesystem;

std::string text_of(const std::string& file) {
  std::ifstream stream{file, std::ios::binary};
  std::ostringstream text;
  text << stream.rdbuf();
  return text.str();
}

/// The environment that a program of a test sees: a home and run-time folder of its own.
std::vector<std::string> environment_of(const Folder& folder, const std::map<std::string, std::string>& more) {
  std::map<std::string, std::string> all{{"HOME", folder.path.string()},
                                         {"XDG_DATA_HOME", folder.file("data")},
                                         {"XDG_CONFIG_HOME", folder.file("config")},
                                         {"XDG_STATE_HOME", folder.file("state")},
                                         {"XDG_RUNTIME_DIR", folder.file("run")}};
  for (const char* name : {"PATH", "LC_ALL", "LOCPATH", "USER", "LOGNAME"})
    if (const char* value = getenv(name)) all.try_emplace(name, value);
  for (const auto& [name, value] : more) all[name] = value;
  std::vector<std::string> lines;
  for (const auto& [name, value] : all) lines.push_back(name + "=" + value);
  return lines;
}

std::vector<char*> pointers(std::vector<std::string>& texts) {
  std::vector<char*> all;
  for (std::string& text : texts) all.push_back(text.data());
  all.push_back(nullptr);
  return all;
}

pid_t start(const std::string& program, const Folder& folder, const std::vector<std::string>& arguments,
            const std::map<std::string, std::string>& more, const std::string& out, const std::string& err,
            const std::string& in = "/dev/null") {
  std::vector<std::string> words{program};
  words.insert(words.end(), arguments.begin(), arguments.end());
  std::vector<std::string> environment = environment_of(folder, more);
  posix_spawn_file_actions_t files;
  posix_spawn_file_actions_init(&files);
  constexpr int fresh = O_CREAT | O_TRUNC | O_WRONLY;
  posix_spawn_file_actions_addopen(&files, STDIN_FILENO, in.c_str(), O_RDONLY, 0);
  posix_spawn_file_actions_addopen(&files, STDOUT_FILENO, out.c_str(), fresh, 0600);
  posix_spawn_file_actions_addopen(&files, STDERR_FILENO, err.c_str(), fresh, 0600);
  pid_t process = -1;
  const int failed =
      posix_spawnp(&process, program.c_str(), &files, nullptr, pointers(words).data(), pointers(environment).data());
  posix_spawn_file_actions_destroy(&files);
  if (failed != 0) throw std::runtime_error("the program does not start: " + program);
  return process;
}

int status_of(int waited) { return WIFEXITED(waited) ? WEXITSTATUS(waited) : 128 + WTERMSIG(waited); }

}  // namespace

const std::string probewright = PW_PROGRAM;

nlohmann::json Ran::json() const {
  try {
    return nlohmann::json::parse(out);
  } catch (const std::exception& error) {
    throw std::runtime_error(std::string{error.what()} + "\nin: " + out + "\nerrors: " + err);
  }
}

Folder::Folder() {
  std::string name = (fs::temp_directory_path() / "probewright-test-XXXXXX").string();
  if (!mkdtemp(name.data())) throw std::runtime_error("no folder for the test");
  path = name;
  fs::create_directory(path / "run");
  fs::permissions(path / "run", fs::perms::owner_all);
}

Folder::~Folder() {
  std::error_code ignored;
  fs::remove_all(path, ignored);
}

std::string Folder::write(const std::string& name, const std::string& text) const {
  const std::string full = file(name);
  fs::create_directories(fs::path{full}.parent_path());
  std::ofstream{full, std::ios::binary} << text;
  return full;
}

Ran run(const Folder& folder, const std::vector<std::string>& arguments,
        const std::map<std::string, std::string>& environment) {
  const std::string out = folder.file(".out"), err = folder.file(".err");
  int waited = 0;
  waitpid(start(probewright, folder, arguments, environment, out, err), &waited, 0);
  return {status_of(waited), text_of(out), text_of(err)};
}

Beside::Beside(const Folder& folder, const std::vector<std::string>& arguments, const std::string& name,
               const std::string& program, const std::string& input)
    : out_file_(folder.file("." + name + ".out")),
      err_file_(folder.file("." + name + ".err")),
      process_(start(program, folder, arguments, {}, out_file_, err_file_, input)) {}

Beside::~Beside() { end(); }

std::string Beside::out() const { return text_of(out_file_); }
std::string Beside::err() const { return text_of(err_file_); }

bool Beside::says(const std::string& text, double seconds) {
  const auto until = std::chrono::steady_clock::now() + std::chrono::duration<double>(seconds);
  while (std::chrono::steady_clock::now() < until) {
    if (out().find(text) != std::string::npos) return true;
    int waited = 0;
    if (process_ > 0 && waitpid(process_, &waited, WNOHANG) == process_) {
      status_ = status_of(waited);
      process_ = -1;
      return out().find(text) != std::string::npos;
    }
    std::this_thread::sleep_for(std::chrono::milliseconds{5});
  }
  return false;
}

int Beside::wait() {
  if (process_ <= 0) return status_;
  int waited = 0;
  waitpid(process_, &waited, 0);
  process_ = -1;
  return status_ = status_of(waited);
}

int Beside::end() { return end_by(SIGTERM); }

int Beside::end_by(int signal) {
  if (process_ > 0) kill(process_, signal);
  return wait();
}

}  // namespace program

#include "db/background_verify.h"

#include <pthread.h>
#include <sched.h>

#include <algorithm>

#include "db/reader.h"
#include "db/schema/schema.h"
#include "db/transaction.h"
#include "db/walk.h"

namespace probewright::db {

/// The connection and its statements, opened by the first step.
struct StepwiseVerify::Open {
  explicit Open(Reader from) : reader(std::move(from)), walker(reader.connection()) {}
  Reader reader;
  RangeWalker walker;
};

StepwiseVerify::StepwiseVerify(std::string path, std::string vfs, std::int64_t from)
    : path_(std::move(path)), vfs_(std::move(vfs)), next_(std::max<std::int64_t>(from, 1)) {}

StepwiseVerify::~StepwiseVerify() = default;

bool StepwiseVerify::step(std::int64_t entries) {
  if (state_.finished) return false;
  try {
    look(entries);
  } catch (const ProblemError& error) {
    state_.trouble = error.problem();
    state_.finished = true;
  }
  return !state_.finished;
}

void StepwiseVerify::look(std::int64_t entries) {
  if (!open_) {
    open_ = std::make_unique<Open>(Reader::open(path_, ReadFrom::live, vfs_).value());
    Connection& connection = open_->reader.connection();
    state_.newest = connection.ask_number("SELECT coalesce(max(number), 0) FROM entry");
    const SchemaDifference difference = schema_difference(connection, connection.ask_number("PRAGMA user_version"));
    if (!difference.what.empty()) state_.fault = Fault{0, "sqlite_schema", difference.name, "sql", difference.what};
  } else if (next_ <= state_.newest) {
    const Snapshot piece(open_->reader.connection());
    const std::int64_t last = std::min(next_ + entries - 1, state_.newest);
    const RangeWalk walk = open_->walker.walk(next_, last);
    state_.fault = walk.fault;
    state_.checked += walk.entries;
    next_ = last + 1;
  }
  state_.finished = state_.fault || next_ > state_.newest;
}

BackgroundVerify::BackgroundVerify(std::string path, std::int64_t from)
    : thread_([this, path = std::move(path), from](const std::stop_token& stop) { run(stop, path, from); }) {}

VerifyState BackgroundVerify::state() const {
  const std::lock_guard lock(mutex_);
  return state_;
}

void BackgroundVerify::run(const std::stop_token& stop, const std::string& path, std::int64_t from) {
  const sched_param none{};
  pthread_setschedparam(pthread_self(), SCHED_IDLE, &none);  // a wish: where it is refused, it runs as any other thread
  constexpr std::int64_t piece = 200;
  StepwiseVerify verify(path, {}, from);
  for (bool more = true; more && !stop.stop_requested();) {
    more = verify.step(piece);
    const std::lock_guard lock(mutex_);
    state_ = verify.state();
  }
}

}  // namespace probewright::db

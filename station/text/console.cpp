#include "station/text/console.h"

#include <algorithm>
#include <ostream>

namespace probewright::text {
namespace {

/// What a shell sees of several problems: "could not" tells more than "refused".
int worst_status(const Problems& problems) {
  int worst = wrong_use;
  for (const Problem& problem : problems) worst = std::max(worst, exit_status(problem.kind()));
  return worst;
}

Json json_of_all(const Problems& problems) {
  Json answer = Json::object();
  answer.set("problem", json_of(problems.front()));
  if (problems.size() == 1) return answer;
  Json all = Json::array();
  for (const Problem& problem : problems) all.add(json_of(problem));
  answer.set("problems", std::move(all));
  return answer;
}

}  // namespace

Json json_of(const Problem& problem) {
  Json json = Json::object();
  json.set("what", problem.what()).set("where", problem.where).set("remedy", problem.remedy());
  return json;
}

void Console::print(std::string_view line) { out_ << line << '\n'; }
void Console::print_text(std::string_view text) { out_ << text; }
void Console::print_json(const Json& answer) { out_ << answer.text(); }
void Console::flush() { out_.flush(); }

int Console::refuse(const Problem& problem) { return refuse(Problems{problem}); }

int Console::refuse(const Problems& problems) {
  if (problems.empty()) return refuse(Problem{"text_no_problem_named", "this program"});
  if (json()) {
    print_json(json_of_all(problems));
  } else {
    for (const Problem& problem : problems) err_ << problem.text() << '\n';
  }
  return worst_status(problems);
}

int Console::refuse(const Problem& problem, ExitStatus status) {
  refuse(problem);
  return status;
}

void Console::say(std::string_view line) {
  if (!json()) err_ << line << '\n' << std::flush;
}

void Console::warn(const Problem& problem) { err_ << problem.text() << '\n'; }

Progress::Progress(Console& console, std::string_view what) : console_(console), what_(what) {}

Progress::~Progress() {
  if (shown_percent_ < 0) return;
  console_.err_ << "\r\x1b[K" << std::flush;  // back to the first column, and clear the line
}

void Progress::at(long long done, long long total) {
  if (console_.json() || !console_.manner_.err_is_terminal || total <= 0) return;
  const int percent = static_cast<int>(100.0 * static_cast<double>(done) / static_cast<double>(total));
  if (percent == shown_percent_) return;
  shown_percent_ = percent;
  console_.err_ << "\r\x1b[K" << what_ << ": " << percent << " %" << std::flush;
}

}  // namespace probewright::text

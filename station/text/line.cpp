#include "station/text/line.h"

#include <poll.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <boost/asio/io_context.hpp>
#include <boost/asio/post.hpp>
#include <boost/asio/signal_set.hpp>
#include <csignal>
#include <map>

#include "station/base/numbers.h"
#include "station/sequence/line_host.h"
#include "station/text/berth_lines.h"
#include "station/text/live_block.h"
#include "station/text/station_choice.h"
#include "station/text/typed_line.h"

namespace probewright::text {
namespace {

namespace asio = boost::asio;
using namespace sequence;

/// Between two looks at what was typed and told, real time.
constexpr int look_ms = 50;
constexpr const char* whose = "the person at the terminal";

std::string nest_words(int nest) { return "nest " + std::to_string(nest); }

/// One line from its start until it is left. The main thread reads and draws; the line has its own thread.
class LineInText {
 public:
  LineInText(const LineOptions& options, const BenchHands* hands, Console& console)
      : options_(options), hands_(hands), console_(console), block_(console, LiveBlock::On::out) {}

  int run(Configuration configuration) {
    if (configuration.people)
      for (const Person& person : configuration.people->value.people) badges_.push_back(person.badge);
    speed_ = configuration.station.value.speed;
    if (auto started = start(std::move(configuration)); !started) return console_.refuse(started.error());
    serve();
    host_->finish(whose);
    io_.restart();
    io_.poll();  // what was told last
    block_.remove();
    host_.reset();
    if (!broken_.empty()) return console_.refuse(Problem{"our_bug", "line", {{"what", broken_}}});
    return done;
  }

 private:
  Result<void> start(Configuration configuration) {
    LineHostOptions host;
    host.ledger = options_.ledger;
    host.ports = options_.ports;
    host.software = {options_.build.version, options_.build.commit, options_.build.compiler};
    host.views_per_s = block_.live() ? 10.0 : 0.0;
    LineHost::Listener listener;
    listener.event = [this](const LineEvent& event) {
      asio::post(io_, [this, event] { std::visit([this](const auto& kind) { heard(kind); }, event); });
    };
    listener.broken = [this](const std::string& what) { asio::post(io_, [this, what] { broken_ = what; }); };
    auto started = LineHost::start(std::move(configuration), host, std::move(listener));
    if (!started) return started.error();
    host_ = std::move(*started);
    say("ledger " + host_->ledger_path());
    for (const ClosedLate& run : host_->closed_late())
      say(Problem{"run_closed_late",
                  "entry " + std::to_string(run.run),
                  {{"serial", run.serial}, {"verdict", std::string{slug(run.verdict)}}}}
              .text());
    return {};
  }

  void serve() {
    signals_.async_wait([this](const boost::system::error_code& error, int) {
      if (!error) stopped_ = true;
    });
    std::optional<OwnEcho> own_echo;
    if (block_.live()) own_echo.emplace();
    while (!stopped_ && broken_.empty() && !(leaving_ && idle())) {
      read();
      io_.poll();
      io_.restart();
      draw();
    }
  }

  /// Waits a little for something typed.
  void read() {
    pollfd waiting{input_ended_ ? -1 : STDIN_FILENO, POLLIN, 0};
    if (::poll(&waiting, 1, look_ms) <= 0 || waiting.revents == 0) return;
    std::array<char, 4096> bytes{};
    const auto count = ::read(STDIN_FILENO, bytes.data(), bytes.size());
    if (count <= 0) {
      input_ended_ = count == 0 || errno != EINTR;
      if (input_ended_) leave();
      return;
    }
    for (const std::string& line : typed_.feed({bytes.data(), static_cast<std::size_t>(count)})) obey(line);
    if (typed_.ended()) leave();
  }

  void obey(const std::string& line) {
    if (line.find_first_not_of(" \t") == std::string::npos) return;
    const Typed typed = meaning_of_typed(line);
    if (std::holds_alternative<Leave>(typed)) {
      if (leaving_) stopped_ = true;
      leave();
      return;
    }
    ++unanswered_;
    host_->request(std::get<LineRequest>(typed));
  }

  void leave() {
    if (!leaving_ && !idle()) say("leaving when what goes on has ended; quit again, or Ctrl-C, to stop it");
    leaving_ = true;
  }

  bool idle() const {
    return unanswered_ == 0 && std::none_of(nests_.begin(), nests_.end(), [](const auto& item) {
             return item.second.state == NestState::running || item.second.state == NestState::armed;
           });
  }

  void heard(const NestChanged& changed) {
    const NestView before = std::exchange(nests_[changed.view.nest], changed.view);
    const bool same = before.state == changed.view.state && before.words == changed.view.words;
    if (!block_.live() && !same) say(nest_words(changed.view.nest) + ": " + changed.view.words);
    if (!hands_ || before.state == changed.view.state) return;
    if (changed.view.state == NestState::armed) use_hands(hands_->seat(changed.view.nest, changed.view.serial));
    if (changed.view.state == NestState::occupied) use_hands(hands_->take_out(changed.view.nest));
  }
  void heard(const RunStarted&) {}
  void heard(const RunEnded& ended) { say(run_line(ended.outcome, speed_)); }
  void heard(const RunNotRecorded& lost) {
    say(nest_words(lost.nest) + ": " + lost.serial + ": " + lost.problem.text());
  }
  void heard(const ArmingEnded& ended) { say(ended.problem.text()); }
  void heard(const Answered& answer) {
    if (unanswered_ > 0) --unanswered_;
    answer_ = answer.words;
    if (!block_.live()) say(answer.words);
  }
  void heard(const PersonChanged&) {}
  void heard(const LotChanged& changed) {
    if (!changed.lot.empty() && unanswered_ == 0) say("lot " + changed.lot + " is open");
  }

  void use_hands(const Result<void>& used) {
    if (!used) say(used.error().text());
  }

  void say(const std::string& words) { block_.say(words); }

  void draw() {
    if (!block_.live()) return;
    const auto view = host_->view();
    std::vector<std::string> lines = head_lines(*view);
    for (const BerthView& berth : view->berths) lines.push_back(berth_line(berth));
    lines.push_back(answer_);
    lines.push_back("scan: " + shown_typed(typed_.text(), badges_));
    block_.draw(lines);
  }

  const LineOptions& options_;
  const BenchHands* hands_;
  Console& console_;
  LiveBlock block_;
  asio::io_context io_{1};
  asio::signal_set signals_{io_, SIGINT, SIGTERM, SIGHUP};  ///< to the end: a second Ctrl-C does not cut it short
  std::vector<std::string> badges_;
  double speed_ = 1.0;
  TypedLine typed_;
  std::map<int, NestView> nests_;
  std::string answer_ = "scan your badge; words: sign out, close lot, stop N, quit";
  int unanswered_ = 0;
  bool input_ended_ = false, leaving_ = false, stopped_ = false;
  std::string broken_;
  std::unique_ptr<LineHost> host_;
};

}  // namespace

Typed meaning_of_typed(const std::string& text) {
  std::string word;
  for (const char c : text) {
    const bool blank = c == ' ' || c == '\t';
    if (!blank)
      word += c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c;
    else if (!word.empty() && word.back() != ' ')
      word += ' ';
  }
  while (!word.empty() && word.back() == ' ') word.pop_back();
  if (word == "quit") return Leave{};
  if (word == "sign out") return LineRequest{SignOut{}};
  if (word == "close lot") return LineRequest{CloseLot{}};
  if (const auto nest = word.starts_with("stop ") ? parse_integer(word.substr(5)) : std::nullopt;
      nest && *nest > 0 && *nest < 100)
    return LineRequest{StopNest{static_cast<int>(*nest), {}}};
  return LineRequest{Scan{text}};
}

namespace {

int line_in_window(const LineOptions& options, Configuration configuration, LineWindow& window, Console& console) {
  LineHostOptions host;
  host.ledger = options.ledger;
  host.ports = options.ports;
  host.software = {options.build.version, options.build.commit, options.build.compiler};
  auto started = LineHost::start(std::move(configuration), host, window.listener());
  if (!started) return console.refuse(started.error());
  const int status = window.open(**started);
  (*started)->finish("the person at the station");
  return status;
}

}  // namespace

int line(const LineOptions& options, const BenchHands* hands, LineWindow* window, Console& console) {
  auto configuration = chosen_configuration(options.choice, options.speed);
  if (!configuration) return console.refuse(configuration.error());
  // Real probes are put in by people, whatever bench may also be running on this machine.
  if (!configuration->station.value.emulated) hands = nullptr;
  if (window && !options.text) return line_in_window(options, std::move(*configuration), *window, console);
  return LineInText{options, hands, console}.run(std::move(*configuration));
}

}  // namespace probewright::text

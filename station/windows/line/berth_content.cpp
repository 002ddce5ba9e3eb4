#include "station/windows/line/berth_content.h"

#include <QCoreApplication>
#include <algorithm>

#include "station/base/numbers.h"
#include "station/base/problem_table.h"
#include "station/windows/line/rail_points.h"
#include "station/windows/words/check_words.h"
#include "station/windows/words/filled.h"
#include "station/windows/words/problem_words.h"
#include "station/windows/words/reading_words.h"
#include "station/windows/words/said_words.h"

namespace probewright::windows {

using namespace sequence;

namespace {

struct Say {
  Q_DECLARE_TR_FUNCTIONS(Berth)
};

/// How long a scan arms a nest; the share that is left is drawn.
constexpr double armed_s = 20.0;

QString text_of(const std::string& text) { return QString::fromStdString(text); }

/// With a capital, as a headline has no full stop.
QString as_headline(QString words) {
  if (!words.isEmpty()) words[0] = words[0].toUpper();
  return words;
}

/// Why a run was void: the problem's own sentence where it needs no argument, else what the line said.
QString cause_words(const LastRun& last) {
  const ProblemRow* row = find_problem(last.cause);
  if (row && row->what.find('{') == std::string_view::npos) return what_words(Problem{last.cause, ""});
  return as_sentence(said(last.cause_words));
}

const JudgedReading* deciding(const RunOutcome* outcome, const LastRun& last) {
  if (!outcome || outcome->run != last.run) return nullptr;
  const auto named = [&](const std::string& check) -> const JudgedReading* {
    const auto found = std::find_if(outcome->readings.begin(), outcome->readings.end(),
                                    [&](const JudgedReading& judged) { return judged.reading.check == check; });
    return found == outcome->readings.end() ? nullptr : &*found;
  };
  const bool decided =
      std::find(outcome->failing.begin(), outcome->failing.end(), last.decided_by) != outcome->failing.end();
  if (decided) return named(last.decided_by);
  return outcome->failing.empty() ? nullptr : named(outcome->failing.front());
}

QString why_it_failed(const LastRun& last, const RunOutcome* outcome) {
  const JudgedReading* judged = deciding(outcome, last);
  QString words = judged ? failing_words(*judged) : as_sentence(said(last.cause_words));
  if (!last.likely_cause.empty()) words += QLatin1Char(' ') + Say::tr("Likely cause: %1.").arg(said(last.likely_cause));
  return words;
}

QString why_it_passed(const std::vector<RailPoint>& points) {
  const RailPoint* nearest = nearest_to_an_edge(points);
  if (!nearest) return {};
  const auto percent = QString::fromStdString(fixed(nearest->margin * 100.0, 0));
  return Say::tr("Nearest to a limit: %1, with %2 % of its room left.").arg(nearest->name, percent);
}

void tell_verdict(BerthContent& content, const LastRun& last, const RunOutcome* outcome) {
  content.serial = text_of(last.serial);
  if (!last.recorded) {
    content.shape = Shape::gap, content.tone = Tone::fail;
    content.headline = Say::tr("Not recorded");
    content.to_do = as_sentence(said(last.what_to_do));
    content.why = Say::tr("The ledger did not take this run, so it has no verdict.");
    return;
  }
  content.shape = shape_of(last.verdict), content.tone = tone_of(last.verdict);
  content.headline = verdict_words(last.verdict);
  content.to_do = as_sentence(said(last.what_to_do));
  content.why = last.verdict == RunVerdict::pass   ? why_it_passed(content.points)
                : last.verdict == RunVerdict::fail ? why_it_failed(last, outcome)
                                                   : cause_words(last);
}

void tell_not_ready(BerthContent& content, const BerthView& view) {
  content.shape = Shape::gap;
  content.headline = Say::tr("Not ready");
  const QString what = view.trouble ? what_words(*view.trouble) : as_sentence(said(view.nest.words));
  const QString remedy = view.trouble ? remedy_words(*view.trouble) : QString{};
  if (!view.last) {
    content.to_do = what, content.why = remedy;
    return;
  }
  // The probe that was in it still needs a hand, so its verdict stays in sight.
  content.serial = text_of(view.last->serial);
  content.note =
      view.last->recorded ? Say::tr("last: %1").arg(verdict_words(view.last->verdict)) : Say::tr("last: not recorded");
  const bool undecided = view.last->verdict == RunVerdict::void_run || !view.last->recorded;
  content.to_do = undecided ? as_sentence(said(view.last->what_to_do)) : what;
  content.why = undecided ? what + QLatin1Char(' ') + remedy : remedy;
}

void tell_armed(BerthContent& content, const NestView& nest, int left_s) {
  content.shape = Shape::inward, content.tone = Tone::wait, content.washed = true;
  content.serial = text_of(nest.serial);
  content.note = Say::tr("%1 s left").arg(left_s);
  content.headline = nest.words.starts_with("close")  ? Say::tr("Close the lid")
                     : nest.words.starts_with("plug") ? Say::tr("Plug it in")
                                                      : Say::tr("Put it in");
  content.to_do = as_sentence(said(nest.words));
  content.time_left = std::clamp(left_s / armed_s, 0.0, 1.0);
}

void tell_running(BerthContent& content, const NestView& nest) {
  content.shape = Shape::turning;
  content.running = true;
  content.serial = text_of(nest.serial);
  content.headline = as_headline(said(nest.doing));
  if (nest.stages > 0) content.note = Say::tr("part %1 of %2").arg(nest.stage).arg(nest.stages);
}

/// What is still to be done once the probe is out.
std::string what_is_left_to_do(std::string words) {
  for (const std::string_view taken_out : {"take the probe out and ", "take the probe out; "})
    if (words.starts_with(taken_out)) return words.substr(taken_out.size());
  return words;
}

void tell_empty(BerthContent& content, const BerthView& view, const RunOutcome* outcome) {
  if (view.last) {
    tell_verdict(content, *view.last, outcome);
    content.to_do = as_sentence(said(what_is_left_to_do(view.last->what_to_do)));
    content.note = Say::tr("empty again");
    return;
  }
  content.shape = Shape::ring, content.tone = Tone::quiet;
  content.headline = Say::tr("Empty");
}

void tell_occupied(BerthContent& content, const BerthView& view, const RunOutcome* outcome) {
  if (view.last) {
    tell_verdict(content, *view.last, outcome);
    content.washed = true;
    if (view.last->purpose != Purpose::production) content.note = purpose_words(view.last->purpose);
    return;
  }
  content.shape = Shape::lift, content.tone = Tone::wait;
  content.headline = Say::tr("Take it out");
  content.to_do = as_sentence(said(view.nest.words));
}

}  // namespace

BerthContent berth_content(const BerthView& view, const RunOutcome* outcome) {
  BerthContent content;
  content.nest = view.nest.nest;
  content.title = Say::tr("Nest %1").arg(view.nest.nest);
  content.passage = view.passage;
  content.progress = view.progress;
  content.points = rail_points(view);
  content.rail_places = static_cast<int>(std::max(view.passage.size(), content.points.size()));
  for (const RailMark& mark : view.marks)
    if (!mark.ok) content.failed.push_back(mark.check);
  content.plots = view.plots;
  switch (view.nest.state) {
    case NestState::not_ready:
      tell_not_ready(content, view);
      break;
    case NestState::empty:
      tell_empty(content, view, outcome);
      break;
    case NestState::occupied:
      tell_occupied(content, view, outcome);
      break;
    case NestState::armed:
      tell_armed(content, view.nest, view.armed_left_s);
      break;
    case NestState::running:
      tell_running(content, view.nest);
      break;
  }
  return content;
}

QString BerthContent::spoken() const {
  QStringList parts{title};
  for (const QString& part : {serial, note, headline, to_do, why})
    if (!part.isEmpty()) parts << part;
  return parts.join(QStringLiteral(". ")).replace(QStringLiteral(".."), QStringLiteral("."));
}

QString verdict_words(RunVerdict verdict) {
  switch (verdict) {
    case RunVerdict::pass:
      return Say::tr("Pass");
    case RunVerdict::fail:
      return Say::tr("Fail");
    case RunVerdict::void_run:
      break;
  }
  return Say::tr("Void");
}

QString purpose_words(Purpose purpose) {
  switch (purpose) {
    case Purpose::production:
      return Say::tr("production");
    case Purpose::engineering:
      return Say::tr("engineering");
    case Purpose::reference:
      return Say::tr("reference probe");
    case Purpose::challenge:
      return Say::tr("challenge probe");
    case Purpose::gauge:
      return Say::tr("gauge study");
    case Purpose::echo:
      return Say::tr("echo");
    case Purpose::training:
      return Say::tr("training");
    case Purpose::returned:
      break;
  }
  return Say::tr("returned probe");
}

Shape shape_of(RunVerdict verdict) {
  return verdict == RunVerdict::pass ? Shape::tick : verdict == RunVerdict::fail ? Shape::cross : Shape::crossbar;
}

Tone tone_of(RunVerdict verdict) {
  return verdict == RunVerdict::pass ? Tone::pass : verdict == RunVerdict::fail ? Tone::fail : Tone::void_run;
}

}  // namespace probewright::windows

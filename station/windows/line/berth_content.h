#pragma once
#include <QString>
#include <memory>
#include <vector>

#include "station/sequence/line_view.h"
#include "station/windows/look/colours.h"
#include "station/windows/look/shapes.h"

namespace probewright::windows {

/// One mark between the margin rails.
struct RailPoint {
  enum class Kind {
    inside,   ///< lets the probe pass
    outside,  ///< does not
    unknown   ///< no value, or one that cannot be judged: it has no position
  };
  QString name;  ///< of the check
  int slot = 0;  ///< its place from left to right
  double position = 0.0, guard = 0.0, whisker = 0.0, margin = 0.0;
  bool one_sided = false;
  Kind kind = Kind::inside;
  bool operator==(const RailPoint&) const = default;
};

/// All that a berth draws, in the language of the screen. Plain values, made anew whenever the line's view of the nest
/// or the language changes.
struct BerthContent {
  int nest = 0;
  QString title;   ///< "Nest 2"
  QString serial;  ///< armed, running, or of the verdict
  QString note;    ///< beside the title: what is so about the nest
  Shape shape = Shape::none;
  Tone tone = Tone::plain;
  bool washed = false;      ///< the head has the tone's ground
  QString headline;         ///< the verdict, or what goes on
  QString to_do;            ///< one sentence for the hands
  QString why;              ///< one or two that explain
  double time_left = -1.0;  ///< while armed: share of the time that is left; else negative
  std::vector<sequence::PassageStep> passage;
  double progress = 0.0;
  std::vector<std::string> failed;  ///< checks whose reading lies outside
  bool running = false;
  int rail_places = 0;  ///< places between the rails
  std::vector<RailPoint> points;
  std::shared_ptr<const sequence::NestPlots> plots;
  bool operator==(const BerthContent&) const = default;

  /// All of it as a sentence, for those who hear the screen.
  QString spoken() const;
};

/// `outcome` of the run that `view.last` tells of, with its readings; nullptr where there is none.
BerthContent berth_content(const sequence::BerthView& view, const sequence::RunOutcome* outcome);

/// "Pass", "Fail", "Void".
QString verdict_words(sequence::RunVerdict verdict);
/// "production", "engineering" ... as the purpose of a run.
QString purpose_words(sequence::Purpose purpose);
Shape shape_of(sequence::RunVerdict verdict);
Tone tone_of(sequence::RunVerdict verdict);

}  // namespace probewright::windows

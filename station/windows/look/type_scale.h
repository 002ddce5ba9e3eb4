#pragma once
#include <QFont>

namespace probewright::windows {

/// The sizes of text, each for one use. All grow together from 100 to 200 %.
enum class Text {
  small,      ///< captions, labels in drawings
  body,       ///< sentences that explain
  strong,     ///< what to do
  headline,   ///< what a nest is doing, where there is little room
  verdict,    ///< the same where there is room
  figure,     ///< numbers of the tally
  workspace,  ///< names of the workspaces
  serial,     ///< serials, in a face whose signs cannot be mistaken
  scan        ///< the scan field
};

/// Fonts of the windows at one text size. Plain value.
class TypeScale {
 public:
  /// `percent` is held between 100 and 200.
  explicit TypeScale(int percent = 100);

  int percent() const { return percent_; }
  QFont font(Text text) const;
  /// Height of one line, in px of the window.
  double line(Text text) const;
  double width(Text text, const QString& words) const;
  /// A length that grows with the text; `px` at 100 %.
  double length(double px) const { return px * percent_ / 100.0; }

 private:
  int percent_;
  QString family_, fixed_family_;
};

}  // namespace probewright::windows

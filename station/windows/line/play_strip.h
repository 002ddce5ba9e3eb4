#pragma once
#include <QWidget>
#include <string>

#include "station/sequence/line_types.h"
#include "station/windows/bench_play.h"

class QHBoxLayout;

namespace probewright::windows {

class Label;
class LineModel;
class Look;
class WordButton;

/// For those who have no bench: what can be scanned, and the hands that put a probe in and take it out. Each is a word
/// that acts on a press or on its key.
class PlayStrip : public QWidget {
  Q_OBJECT
 public:
  /// All of it outlives the strip.
  PlayStrip(BenchPlay& play, LineModel& model, const Look& look, QWidget* parent = nullptr);

  /// What a newcomer does next: signs in, opens the lot, scans a probe, puts it in, takes it out.
  void do_next();

 protected:
  void paintEvent(QPaintEvent* event) override;
  void changeEvent(QEvent* event) override;

 private:
  /// The next thing to do, as words and as an action.
  enum class Next { sign_in, open_lot, scan, put_in, take_out, wait };
  Next next() const;
  int nest_in(sequence::NestState state) const;
  void say();
  void tell(const Result<void>& done);

  BenchPlay& play_;
  LineModel& model_;
  const Look& look_;
  Label *title_, *said_;
  WordButton* next_;
};

}  // namespace probewright::windows

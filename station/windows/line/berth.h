#pragma once
#include <QWidget>

#include "station/windows/line/berth_content.h"
#include "station/windows/line/berth_plan.h"

namespace probewright::windows {

class Look;

/// One nest on the screen, drawn by this one widget. Draws anew only the parts of which the content changed.
class Berth : public QWidget {
  Q_OBJECT
 public:
  /// `look` outlives the berth.
  explicit Berth(const Look& look, QWidget* parent = nullptr);

  void show_content(BerthContent content);
  const BerthContent& content() const { return content_; }
  /// The keyboard stands on this berth.
  void set_chosen(bool chosen);
  /// Parts that were drawn since the berth was made: an unchanged or hidden one draws none.
  int drawn_parts() const { return drawn_; }

 signals:
  /// A person pressed on the berth.
  void pressed(int nest);
  /// A person asks for the readings.
  void opened(int nest);

 protected:
  void paintEvent(QPaintEvent* event) override;
  void resizeEvent(QResizeEvent* event) override;
  void mousePressEvent(QMouseEvent* event) override;
  void mouseDoubleClickEvent(QMouseEvent* event) override;

 private:
  void plan();
  void draw_card(QPainter& painter);
  void draw_head(QPainter& painter);
  void draw_title(QPainter& painter);
  void draw_words(QPainter& painter);
  QRect part(const QRectF& place) const;

  const Look& look_;
  BerthContent content_;
  BerthPlan plan_;
  bool chosen_ = false;
  int drawn_ = 0;
};

}  // namespace probewright::windows

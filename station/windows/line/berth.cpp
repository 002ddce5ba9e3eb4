#include "station/windows/line/berth.h"

#include <QMouseEvent>
#include <QPaintEvent>
#include <QPainter>
#include <QPainterPath>
#include <utility>

#include "station/windows/line/margin_rails.h"
#include "station/windows/line/passage_bar.h"
#include "station/windows/line/small_plots.h"
#include "station/windows/look/look.h"
#include "station/windows/look/written.h"

namespace probewright::windows {
namespace {

constexpr double corner = 6.0;

QPainterPath card_of(const QRectF& whole, double inset) {
  QPainterPath path;
  path.addRoundedRect(whole.adjusted(inset, inset, -inset, -inset), corner, corner);
  return path;
}

bool same_head(const BerthContent& a, const BerthContent& b) {
  return a.title == b.title && a.serial == b.serial && a.note == b.note && a.shape == b.shape && a.tone == b.tone &&
         a.washed == b.washed && a.headline == b.headline && a.time_left == b.time_left;
}

}  // namespace

Berth::Berth(const Look& look, QWidget* parent) : QWidget(parent), look_(look) {
  setFocusPolicy(Qt::NoFocus);
  connect(&look, &Look::changed, this, &Berth::plan);
}

QRect Berth::part(const QRectF& place) const { return place.toAlignedRect().adjusted(-2, -4, 2, 4); }

void Berth::show_content(BerthContent content) {
  const BerthContent before = std::exchange(content_, std::move(content));
  if (!same_head(before, content_)) update(part(plan_.head));
  if (before.passage != content_.passage || before.progress != content_.progress || before.failed != content_.failed)
    update(part(plan_.bar));
  if (before.points != content_.points || before.rail_places != content_.rail_places)
    update(part(label_room(plan_.rails, look_.type())));
  if (before.plots != content_.plots) {
    update(part(plan_.spectra));
    update(part(plan_.pulses));
  }
  if (before.to_do != content_.to_do || before.why != content_.why) update(part(plan_.words));
  if (const QString spoken = content_.spoken(); spoken != accessibleName()) {
    setAccessibleName(spoken);
    setToolTip(spoken);  // in a small berth not all of it is written
  }
}

void Berth::set_chosen(bool chosen) {
  if (std::exchange(chosen_, chosen) != chosen) update();
}

void Berth::plan() {
  plan_ = plan_berth(size(), look_.type());
  update();
}

void Berth::resizeEvent(QResizeEvent*) { plan(); }

void Berth::mousePressEvent(QMouseEvent*) { emit pressed(content_.nest); }

void Berth::mouseDoubleClickEvent(QMouseEvent*) { emit opened(content_.nest); }

void Berth::paintEvent(QPaintEvent* event) {
  QPainter painter{this};
  const QRectF asked = event->rect();
  const auto wanted = [&](const QRectF& place) {
    const bool is = !place.isEmpty() && place.intersects(asked);
    if (is) ++drawn_;
    return is;
  };
  draw_card(painter);
  if (wanted(plan_.head)) draw_head(painter);
  if (wanted(plan_.bar))
    draw_passage_bar(painter, plan_.bar, segments_of(content_.passage, content_.progress, content_.failed),
                     look_.colours());
  if (wanted(label_room(plan_.rails, look_.type())))
    draw_margin_rails(painter, plan_.rails, content_.points, content_.rail_places, look_);
  if (wanted(plan_.spectra)) draw_spectra(painter, plan_.spectra, content_.plots.get(), look_);
  if (wanted(plan_.pulses)) draw_pulses(painter, plan_.pulses, content_.plots.get(), look_);
  if (wanted(plan_.words)) draw_words(painter);
}

void Berth::draw_card(QPainter& painter) {
  const Colours& colours = look_.colours();
  painter.setRenderHint(QPainter::Antialiasing);
  painter.fillRect(rect(), colours.paper);
  const QPainterPath card = card_of(rect(), 1.0);
  painter.fillPath(card, colours.card);
  if (content_.washed) {
    painter.save();
    painter.setClipPath(card);
    painter.fillRect(plan_.head, colours.wash_of(content_.tone));
    painter.restore();
  }
  painter.setPen(QPen{chosen_ ? colours.accent : colours.hairline, chosen_ ? 2.0 : 1.0});
  painter.setBrush(Qt::NoBrush);
  painter.drawPath(card);
}

void Berth::draw_head(QPainter& painter) {
  const Colours& colours = look_.colours();
  draw_title(painter);
  draw_shape(painter, content_.shape, plan_.shape, colours.of(content_.tone));
  const bool quiet = content_.tone == Tone::quiet;
  const bool verdict = content_.tone == Tone::pass || content_.tone == Tone::fail || content_.tone == Tone::void_run;
  // What goes on is a sentence, not a verdict: it is told in the smaller size, so that it fits in its row.
  const Text text = verdict ? plan_.headline_text : Text::headline;
  QFont font = look_.type().font(text);
  if (quiet) font.setBold(false);
  font = fitting(font, content_.headline, plan_.headline.width());
  write_line(painter, plan_.headline, content_.headline, font, colours.of(content_.tone));
  if (content_.time_left >= 0.0) {
    const double thick = look_.type().length(3);
    const double top = plan_.short_title ? plan_.head.top() + 2 : plan_.head.bottom() - thick - 1;
    const QRectF strip{plan_.head.left() + 2, top, (plan_.head.width() - 4) * content_.time_left, thick};
    painter.fillRect(strip, colours.wait);
  }
}

void Berth::draw_title(QPainter& painter) {
  const Colours& colours = look_.colours();
  const TypeScale& type = look_.type();
  const bool own_row = !plan_.serial.isEmpty();
  write_line(painter, own_row ? plan_.serial : plan_.title, content_.serial, type.font(Text::serial), colours.ink,
             own_row ? Qt::AlignLeft : Qt::AlignRight);
  QFont bold = type.font(Text::body);
  bold.setBold(true);
  const QString title = plan_.short_title ? QString::number(content_.nest) : content_.title;
  write_line(painter, plan_.title, title, bold, colours.ink);
  if (plan_.short_title) return;
  QRectF note = plan_.title.adjusted(type.width(Text::body, title) * 1.12 + type.length(8), 0, 0, 0);
  if (!own_row) note.setRight(note.right() - type.width(Text::serial, content_.serial) - type.length(6));
  write_line(painter, note, content_.note, type.font(Text::body), colours.quiet,
             own_row ? Qt::AlignRight : Qt::AlignLeft);
}

void Berth::draw_words(QPainter& painter) {
  const TypeScale& type = look_.type();
  const bool wide = plan_.form == BerthPlan::Form::wide;
  QRectF left = plan_.words;
  const auto fit = [&](Text text) { return static_cast<int>(left.height() / type.line(text) + 0.05); };
  const Text strong = wide ? Text::body : Text::strong;
  left.setTop(left.top() + write(painter, left, {content_.to_do, type.font(strong), fit(strong)}, look_.colours().ink));
  const Written why{content_.why, type.font(Text::body), fit(Text::body)};
  // Half a reason helps nobody but after a fail: where there is little room, it is told whole or not at all.
  if (content_.tone == Tone::fail || lines_of(why, left.width()) <= why.most_lines)
    write(painter, left, why, look_.colours().quiet);
}

}  // namespace probewright::windows

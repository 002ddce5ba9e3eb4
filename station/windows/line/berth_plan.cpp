#include "station/windows/line/berth_plan.h"

#include <algorithm>
#include <cmath>

namespace probewright::windows {
namespace {

using Form = BerthPlan::Form;

// Lengths in lines of body text, so that everything grows with the text.
constexpr double middle_height = 12.5, tall_height = 20.5, tall_width = 13.0;
constexpr double wide_height = 3.55, wide_width = 10.5;

/// Cuts a strip off the top of what is left.
QRectF cut(QRectF& left, double height) {
  const double taken = std::min(height, left.height());
  const QRectF strip{left.left(), left.top(), left.width(), taken};
  left.setTop(left.top() + taken);
  return strip;
}

void place_headline(BerthPlan& plan, const QRectF& row, const TypeScale& type, Text text) {
  plan.headline_text = text;
  const double shape = type.line(text) * 0.62;
  plan.shape = {row.left(), row.center().y() - shape / 2, shape, shape};
  plan.headline = row.adjusted(shape + type.length(text == Text::verdict ? 12 : 8), 0, 0, 0);
}

/// Whether the longest usual serial and title fit into one row.
bool one_title_row(double width, const TypeScale& type) {
  return width >= type.width(Text::serial, QStringLiteral("AQ20-048-00137")) +
                      type.width(Text::body, QStringLiteral("Nest 16 part 3 of 7 "));
}

void plan_stacked(BerthPlan& plan, QSizeF size, const TypeScale& type) {
  const double line = type.line(Text::body), pad = type.length(size.width() < 12 * line ? 9 : 14);
  QRectF left{pad, pad * 0.7, size.width() - 2 * pad, size.height() - pad * 1.4};
  plan.title = cut(left, line);
  if (!one_title_row(left.width(), type)) plan.serial = cut(left, line);
  const Text text = plan.form == Form::tall ? Text::verdict : Text::headline;
  place_headline(plan, cut(left, type.line(text) * 1.1), type, text);
  plan.head = {0, 0, size.width(), left.top() + pad * 0.2};
  cut(left, pad * 0.8);
  plan.bar = cut(left, line * 0.55);
  cut(left, line * 0.6);
  const double plots = plan.form == Form::tall ? line * 4.6 : 0.0, spaces = line * 0.5;
  const double room = left.height() - plots - spaces;
  // Rails keep their height whatever the words are, so that nothing jumps and neighbours can be compared.
  const double wanted = size.width() > 24 * line ? 3.6 : 6.2;
  const double words = std::clamp(room - 4.8 * line, 2.4 * line, wanted * line);
  const double rails = std::clamp(room - words, line * 3.0, line * 14.0);
  plan.rails = cut(left, rails);
  if (plots > 0) {
    cut(left, line * 0.4);
    QRectF row = cut(left, plots - line * 0.4);
    const double gap = pad * 0.8, half = (row.width() - gap) / 2;
    plan.spectra = {row.left(), row.top(), half, row.height()};
    plan.pulses = {row.left() + half + gap, row.top(), half, row.height()};
  }
  cut(left, line * 0.4);
  plan.words = left;
}

void plan_wide(BerthPlan& plan, QSizeF size, const TypeScale& type) {
  const double line = type.line(Text::body), pad = type.length(8);
  const bool low = size.height() < 5.6 * line;  // the words then take the whole width
  const double serial = type.width(Text::serial, QStringLiteral("AQ20-048-00137 "));
  const double share = low ? serial + type.width(Text::body, QStringLiteral("16")) : size.width() * 0.46 - pad;
  const double words = std::max(serial, share);
  const double inset = pad * (low ? 0.3 : 0.4);
  QRectF left{pad, inset, words, size.height() - 2 * inset};
  plan.short_title = low;
  plan.title = cut(left, low ? type.line(Text::serial) : line);
  if (!low && !one_title_row(words, type)) plan.serial = cut(left, line);
  place_headline(plan, cut(left, type.line(Text::headline)), type, Text::headline);
  const double rails_bottom = low ? left.top() : size.height() - pad;
  plan.head = {0, 0, words + 1.5 * pad, low ? left.top() : size.height()};
  plan.words = left;
  if (low) plan.words.setWidth(size.width() - 2 * pad);
  QRectF right{plan.head.right() + pad * 0.5, pad, size.width() - plan.head.right() - pad * 1.5, rails_bottom - pad};
  plan.bar = cut(right, line * 0.35);
  cut(right, line * 0.25);
  plan.rails = right;
}

double score(QSizeF berth, const TypeScale& type) {
  const double line = type.line(Text::body), width = berth.width() / line, height = berth.height() / line;
  const double stacked = std::min({width / tall_width, height / middle_height, 1.6});
  const double wide = 0.8 * std::min({width / (1.3 * wide_width), height / (1.75 * wide_height), 1.0});
  return height >= middle_height ? stacked : std::max(wide, stacked * 0.5);
}

}  // namespace

Form form_for(QSizeF size, const TypeScale& type) {
  const double line = type.line(Text::body);
  if (size.height() >= tall_height * line && size.width() >= tall_width * line) return Form::tall;
  return size.height() >= middle_height * line ? Form::middle : Form::wide;
}

BerthPlan plan_berth(QSizeF size, const TypeScale& type) {
  BerthPlan plan;
  plan.form = form_for(size, type);
  plan.form == Form::wide ? plan_wide(plan, size, type) : plan_stacked(plan, size, type);
  return plan;
}

QSizeF least_berth(const TypeScale& type) {
  const double line = type.line(Text::body);
  return {std::max(wide_width * line, type.width(Text::serial, QStringLiteral("AQ20-048-00137 ")) * 1.6),
          wide_height * line};
}

int columns_for(int berths, QSizeF room, const TypeScale& type) {
  int best = 1;
  double best_score = -1.0;
  for (int columns = 1; columns <= berths; ++columns) {
    const int rows = (berths + columns - 1) / columns;
    const double full = std::sqrt(static_cast<double>(berths) / (columns * rows));
    const double found = full * score({room.width() / columns, room.height() / rows}, type);
    if (found > best_score * 1.0001) best = columns, best_score = found;
  }
  return best;
}

}  // namespace probewright::windows

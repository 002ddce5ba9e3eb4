#pragma once
#include <QRectF>
#include <QSizeF>

#include "station/windows/look/type_scale.h"

namespace probewright::windows {

/// How a berth divides its room. A part that there is no room for is empty.
struct BerthPlan {
  enum class Form {
    tall,    ///< everything, with both plots
    middle,  ///< without plots
    wide     ///< low: words on the left, rails on the right
  } form = Form::tall;
  QRectF head;               ///< title row and headline, with its ground
  QRectF title;              ///< nest, note, serial
  bool short_title = false;  ///< the nest's number alone; no note
  QRectF serial;             ///< where the serial has a row of its own; else empty: it stands in the title row
  QRectF shape, headline;
  Text headline_text = Text::verdict;
  QRectF bar, rails, spectra, pulses;  ///< plots with their captions
  QRectF words;
};

/// Divides a berth of this size. Pure.
BerthPlan plan_berth(QSizeF size, const TypeScale& type);

/// Which form is drawn in a room of this size.
BerthPlan::Form form_for(QSizeF size, const TypeScale& type);

/// Less than that cannot be read: the berths then scroll.
QSizeF least_berth(const TypeScale& type);

/// How many columns show `berths` best in this room. Pure.
int columns_for(int berths, QSizeF room, const TypeScale& type);

}  // namespace probewright::windows

#pragma once

// Where the measurands look for the light of each colour: part of their definitions, beside the threshold.
namespace probewright::emulated {

struct Window {
  double low_nm, high_nm;
};
inline constexpr Window red_window{605.0, 785.0}, infrared_window{800.0, 1045.0};
/// What the red LED sends out elsewhere.
inline constexpr Window secondary_window{800.0, 1000.0};
inline constexpr double centroid_threshold = 0.01;  ///< of the peak

}  // namespace probewright::emulated

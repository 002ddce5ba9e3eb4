#pragma once
#include <cstddef>
#include <functional>
#include <stop_token>

namespace probewright::trace {

/// Calls `work(worker, item)` once for each item from 0 to `items` - 1, in rising order of items over all workers, on
/// `threads` threads (0: as many as the machine has). A worker is one thread; `work` may keep things by its number,
/// which is below workers_for(threads). `progress` is called in the calling thread. The first exception ends the work
/// and comes out here. False when it was stopped before the last item.
bool in_parallel(int threads, std::size_t items, const std::function<void(std::size_t worker, std::size_t item)>& work,
                 const std::function<void(std::size_t done, std::size_t total)>& progress, const std::stop_token& stop);
std::size_t workers_for(int threads);

}  // namespace probewright::trace

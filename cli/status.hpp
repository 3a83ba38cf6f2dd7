#pragma once

namespace runnel_cli {

/// Exit statuses; there are no others.
enum Status : int {
    done = 0,         ///< warnings allowed
    input_errors = 1, ///< or a balance that does not close
    wrong_usage = 2,
    file_trouble = 3 ///< cannot be read or written
};

} // namespace runnel_cli

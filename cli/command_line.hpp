#pragma once

namespace runnel_cli {

/// Reads the arguments, makes the one library call they ask for, returns the exit status.
int run(int count, char** arguments);

} // namespace runnel_cli

#pragma once

#include <runnel/report.hpp>

#include <string>

namespace runnel_cli {

/// Writes the result, its tables and a drawing of each level into a folder, which is made where it is not
/// there, and says on standard error which files it wrote. Files of earlier runs are removed before; nothing
/// else is. Of a plan with errors, the result alone. False, with a sentence on standard error, where
/// something cannot be written.
[[nodiscard]] bool write_folder(const std::string& folder, const runnel::Takedown& takedown,
                                const runnel::ReportOptions& options);

} // namespace runnel_cli

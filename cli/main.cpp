#include "command_line.hpp"

int main(int count, char** arguments) {
    return runnel_cli::run(count, arguments);
}

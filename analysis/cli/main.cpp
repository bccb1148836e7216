#include "analysis/cli/commands.h"
#include "analysis/cli/interrupt.h"

int main(int count, char** arguments) {
    lacuna::ignore_write_signals();
    return lacuna::run_lacuna(count, arguments, {LACUNA_VERSION, LACUNA_COMMIT, LACUNA_LIBRARIES, LACUNA_FLAGS});
}

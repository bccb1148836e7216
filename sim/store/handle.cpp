#include "sim/store/handle.h"

namespace lacuna {

namespace {

herr_t innermost(unsigned, const H5E_error2_t* error, void* out) {
    auto& text = *static_cast<std::string*>(out);
    if (text.empty() && error->desc != nullptr) text = error->desc;
    return 0;
}

}  // namespace

std::string hdf5_reason() {
    std::string text;
    H5Ewalk2(H5E_DEFAULT, H5E_WALK_UPWARD, innermost, &text);
    H5Eclear2(H5E_DEFAULT);
    return text.empty() ? "no reason given by the HDF5 library" : text;
}

void silence_hdf5() { H5Eset_auto2(H5E_DEFAULT, nullptr, nullptr); }

Handle checked(hid_t id, Handle::Close closer, const std::string& what) {
    if (id < 0) throw RunError(what + ": " + hdf5_reason());
    return {id, closer};
}

void check(herr_t status, const std::string& what) {
    if (status < 0) throw RunError(what + ": " + hdf5_reason());
}

}  // namespace lacuna

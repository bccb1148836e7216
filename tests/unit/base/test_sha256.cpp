#include <catch2/catch.hpp>
#include <string>

#include "sim/base/sha256.h"

using lacuna::sha256_hex;

TEST_CASE("SHA-256 gives the example digests of FIPS 180-4 (NIST CSRC, SHA256.pdf and SHA2_Additional.pdf)") {
    CHECK(sha256_hex("abc") == "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    CHECK(sha256_hex("") == "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855");
    CHECK(sha256_hex("abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq") ==
          "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1");
    CHECK(sha256_hex("abcdefghbcdefghicdefghijdefghijkefghijklfghijklmghijklmn"
                     "hijklmnoijklmnopjklmnopqklmnopqrlmnopqrsmnopqrstnopqrstu") ==
          "cf5b16a778af8380036ce59e7b0492370b249b11e8f07a51afac45037afee9d1");
    CHECK(sha256_hex(std::string(1000000, 'a')) ==
          "cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0");
}

TEST_CASE("SHA-256 pads every length around one and two blocks as Python's hashlib does") {
    // hashlib.sha256(''.join(hashlib.sha256(b'x' * n).hexdigest() for n in range(131)).encode())
    std::string digests;
    for (std::size_t n = 0; n < 131; ++n) digests += sha256_hex(std::string(n, 'x'));
    CHECK(sha256_hex(digests) == "87aca1c44bc7ba8897768170211f0a02063de70801131ff86c7edb9ce32c6a50");
}

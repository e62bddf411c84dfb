// SHA-256 of a block of memory. C++17, standard library only.
#ifndef COUPLET_SHA256_HPP
#define COUPLET_SHA256_HPP

#include <array>
#include <cstddef>
#include <cstdint>
#include <string_view>

namespace couplet {

using Digest = std::array<std::uint8_t, 32>;

namespace detail {

// First 32 bits of the fractional parts of the cube roots of the first 64 primes (FIPS 180-4, section 4.2.2).
inline constexpr std::array<std::uint32_t, 64> SHA256_ROUNDS = {
    0x428a2f98, 0x71374491, 0xb5c0fbcf, 0xe9b5dba5, 0x3956c25b, 0x59f111f1, 0x923f82a4, 0xab1c5ed5,
    0xd807aa98, 0x12835b01, 0x243185be, 0x550c7dc3, 0x72be5d74, 0x80deb1fe, 0x9bdc06a7, 0xc19bf174,
    0xe49b69c1, 0xefbe4786, 0x0fc19dc6, 0x240ca1cc, 0x2de92c6f, 0x4a7484aa, 0x5cb0a9dc, 0x76f988da,
    0x983e5152, 0xa831c66d, 0xb00327c8, 0xbf597fc7, 0xc6e00bf3, 0xd5a79147, 0x06ca6351, 0x14292967,
    0x27b70a85, 0x2e1b2138, 0x4d2c6dfc, 0x53380d13, 0x650a7354, 0x766a0abb, 0x81c2c92e, 0x92722c85,
    0xa2bfe8a1, 0xa81a664b, 0xc24b8b70, 0xc76c51a3, 0xd192e819, 0xd6990624, 0xf40e3585, 0x106aa070,
    0x19a4c116, 0x1e376c08, 0x2748774c, 0x34b0bcb5, 0x391c0cb3, 0x4ed8aa4a, 0x5b9cca4f, 0x682e6ff3,
    0x748f82ee, 0x78a5636f, 0x84c87814, 0x8cc70208, 0x90befffa, 0xa4506ceb, 0xbef9a3f7, 0xc67178f2};

inline constexpr std::size_t SHA256_BLOCK = 64;

inline std::uint32_t rotate_right(std::uint32_t x, unsigned n) { return (x >> n) | (x << (32 - n)); }

// Takes one block of 64 bytes into the state (FIPS 180-4, section 6.2.2).
inline void sha256_block(std::array<std::uint32_t, 8>& state, const std::uint8_t* block) {
  std::array<std::uint32_t, 64> w;
  for (std::size_t t = 0; t < 16; ++t) {
    const std::uint8_t* b = block + 4 * t;
    w[t] = std::uint32_t{b[0]} << 24 | std::uint32_t{b[1]} << 16 | std::uint32_t{b[2]} << 8 | std::uint32_t{b[3]};
  }
  for (std::size_t t = 16; t < 64; ++t) {
    const std::uint32_t s0 = rotate_right(w[t - 15], 7) ^ rotate_right(w[t - 15], 18) ^ (w[t - 15] >> 3);
    const std::uint32_t s1 = rotate_right(w[t - 2], 17) ^ rotate_right(w[t - 2], 19) ^ (w[t - 2] >> 10);
    w[t] = w[t - 16] + s0 + w[t - 7] + s1;
  }
  auto [a, b, c, d, e, f, g, h] = state;
  for (std::size_t t = 0; t < 64; ++t) {
    const std::uint32_t s1 = rotate_right(e, 6) ^ rotate_right(e, 11) ^ rotate_right(e, 25);
    const std::uint32_t t1 = h + s1 + ((e & f) ^ (~e & g)) + SHA256_ROUNDS[t] + w[t];
    const std::uint32_t s0 = rotate_right(a, 2) ^ rotate_right(a, 13) ^ rotate_right(a, 22);
    const std::uint32_t t2 = s0 + ((a & b) ^ (a & c) ^ (b & c));
    h = g, g = f, f = e, e = d + t1, d = c, c = b, b = a, a = t1 + t2;
  }
  const std::array<std::uint32_t, 8> change = {a, b, c, d, e, f, g, h};
  for (std::size_t i = 0; i < 8; ++i) state[i] += change[i];
}

}  // namespace detail

// SHA-256 of a string of bytes.
// Source: National Institute of Standards and Technology, FIPS 180-4, Secure Hash Standard (2015), sections 4 to 6;
// provenance: memory.
inline Digest sha256(std::string_view bytes) {
  using detail::SHA256_BLOCK;
  // First 32 bits of the fractional parts of the square roots of the first 8 primes.
  std::array<std::uint32_t, 8> state = {0x6a09e667, 0xbb67ae85, 0x3c6ef372, 0xa54ff53a,
                                        0x510e527f, 0x9b05688c, 0x1f83d9ab, 0x5be0cd19};
  const auto* data = reinterpret_cast<const std::uint8_t*>(bytes.data());
  const std::size_t whole = bytes.size() / SHA256_BLOCK * SHA256_BLOCK;
  for (std::size_t at = 0; at < whole; at += SHA256_BLOCK) detail::sha256_block(state, data + at);
  // What is left, a bit 1, zeros, and the length in bits: one block, or two where the length does not fit.
  std::array<std::uint8_t, 2 * SHA256_BLOCK> tail{};
  const std::size_t left = bytes.size() - whole;
  for (std::size_t i = 0; i < left; ++i) tail[i] = data[whole + i];
  tail[left] = 0x80;
  const std::size_t length = left < SHA256_BLOCK - 8 ? SHA256_BLOCK : 2 * SHA256_BLOCK;
  const std::uint64_t bits = std::uint64_t{bytes.size()} * 8;
  for (std::size_t i = 0; i < 8; ++i) tail[length - 1 - i] = static_cast<std::uint8_t>(bits >> (8 * i));
  for (std::size_t at = 0; at < length; at += SHA256_BLOCK) detail::sha256_block(state, tail.data() + at);
  Digest digest;
  for (std::size_t i = 0; i < digest.size(); ++i) {
    digest[i] = static_cast<std::uint8_t>(state[i / 4] >> (24 - 8 * (i % 4)));
  }
  return digest;
}

}  // namespace couplet

#endif

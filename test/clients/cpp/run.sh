#!/usr/bin/env bash
# Builds the C++ readers, their example and their tests with all warnings as errors and with the address and
# undefined-behaviour sanitizers, and runs them. Usage: run.sh TABLE_FILE PROTO_DIR WORK_DIR
# Leaves WORK_DIR/evaluate for test_agreement.py. Last line: N passed, N failed.
set -uo pipefail
table=$(realpath "$1") proto=$(realpath "$2") work=$3
here=$(cd "$(dirname "$0")" && pwd)
. "$here/../../support/checks.sh"
source=$(cd "$here/../../../src/clients/cpp" && pwd)
mkdir -p "$work/gen"

tools() {
  local tool
  for tool in g++ protoc pkg-config sha256sum; do
    command -v "$tool" >/dev/null || { echo "missing tool: $tool (Debian: g++ protobuf-compiler pkg-config coreutils)"; return 1; }
  done
  pkg-config --exists protobuf || { echo "missing library: protobuf (Debian: libprotobuf-dev)"; return 1; }
}

sanitizers=(-fsanitize=address,undefined -fno-sanitize-recover=all)
strict=(-std=c++17 -Wall -Wextra -Werror "${sanitizers[@]}")
# Programs that build with more warnings can include the headers too.
stricter=(-Wpedantic -Wconversion -Wsign-conversion -Wshadow)

compile_schema() {
  protoc -I "$proto" --cpp_out="$work/gen" couplet/v1/exact.proto couplet/v1/decays.proto || return 1
  local name
  for name in exact decays; do
    g++ "${strict[@]}" -I "$work/gen" -c "$work/gen/couplet/v1/$name.pb.cc" -o "$work/$name.o" || return 1
  done
}

with_protobuf() {
  # shellcheck disable=SC2046
  g++ "${strict[@]}" -isystem "$work/gen" -I "$source" "$@" "$work/exact.o" "$work/decays.o" $(pkg-config --cflags --libs protobuf)
}

without_protobuf() { g++ "${strict[@]}" "${stricter[@]}" -I "$source" "$@"; }

# Into a file first: grep -q ends early, and a broken pipe would count as a failure or, negated, as none.
needs_no_protobuf() {
  ldd "$work/example-plain" >"$work/plain.ldd" && ldd "$work/example-with-protobuf" >"$work/with.ldd" &&
    ! grep -q protobuf "$work/plain.ldd" && grep -q protobuf "$work/with.ldd"
}

# Both variants of the example draw with the same numbers, so they print the same.
examples_agree() {
  "$work/example-plain" "$table" >"$work/plain.txt" && "$work/example-with-protobuf" "$table" >"$work/with.txt" &&
    grep -q -- '->' "$work/plain.txt" && cmp "$work/plain.txt" "$work/with.txt"
}

exit_codes() {
  head -c 1000 "$table" >"$work/cut.pb"
  local variant status
  for variant in plain with-protobuf; do
    "$work/example-$variant" "$work/cut.pb" >/dev/null 2>&1; status=$?
    [ $status = 3 ] || { echo "a damaged file: exit code $status"; return 1; }
    "$work/example-$variant" "$0" >/dev/null 2>&1; status=$?
    [ $status = 2 ] || { echo "a foreign file: exit code $status"; return 1; }
    "$work/example-$variant" "$table" nobody >/dev/null 2>&1; status=$?
    [ $status = 2 ] || { echo "an unknown parent: exit code $status"; return 1; }
  done
}

digests_agree() {
  local n
  for n in $(seq 0 300); do head -c "$n" "$table" | sha256sum | cut -c 1-64; done >"$work/sha256sum.txt"
  "$work/decays_test" prefixes "$table" | cmp - "$work/sha256sum.txt"
}

check "tools" tools
[ "$failed" -eq 0 ] || finish
check "C++ classes of the schema" compile_schema
check "example without a protobuf library" without_protobuf "$source/example.cpp" -o "$work/example-plain"
check "example with protobuf" with_protobuf -DCOUPLET_WITH_PROTOBUF "$source/example.cpp" -o "$work/example-with-protobuf"
check "evaluation for the comparison of languages" without_protobuf "$here/evaluate.cpp" -o "$work/evaluate"
check "weights of replicas for the comparison of languages" without_protobuf "$here/replica_weights.cpp" -o "$work/replica-weights-plain"
check "the same with protobuf" with_protobuf -DCOUPLET_WITH_PROTOBUF "$here/replica_weights.cpp" -o "$work/replica-weights-with-protobuf"
check "tests" with_protobuf -O2 "$here/decays_test.cpp" -o "$work/decays_test"
[ "$failed" -eq 0 ] || finish
check "the plain reader needs no protobuf library" needs_no_protobuf
check "both variants of the example print the same" examples_agree
check "exit codes of the example" exit_codes
check "SHA-256 of 0 to 300 bytes as sha256sum gives it" digests_agree
check "tests run without an error of the sanitizers" counted "$work/decays_test" "$table"
finish

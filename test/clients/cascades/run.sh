#!/usr/bin/env bash
# Whole cascades in C++, Python and TypeScript: makes tables, builds the C++ programs with all warnings as errors and with
# the address and undefined-behaviour sanitizers, and runs the tests. Usage: run.sh DIST PROTO_DIR WORK_DIR, with the folder
# of the compiled TypeScript. Last line: N passed, N failed.
set -uo pipefail
dist=$(realpath "$1") proto=$(realpath "$2") work=$3
here=$(cd "$(dirname "$0")" && pwd)
. "$here/../../support/checks.sh"
root=$(cd "$here/../../.." && pwd)
source=$root/src/clients/cpp
mkdir -p "$work/gen" "$work/python"

tools() {
  local tool
  for tool in node g++ protoc pkg-config; do
    command -v "$tool" >/dev/null || { echo "missing tool: $tool"; return 1; }
  done
}

tables() {
  node "$dist/cli/main.js" demo --out "$work/tables" >"$work/tables.log" || return 1
  local study
  for study in mesons-whole octet-5-2-whole n1520-delta-pi; do
    node "$dist/cli/main.js" tables "$root/test/chain/studies/$study.yaml" -o "$work/tables" >"$work/tables.log" || return 1
  done
}
files=("$work/tables/larkfield.decays.pb" "$work/tables/mesons-whole.decays.pb" "$work/tables/octet-5-2-whole.decays.pb"
  "$work/tables/n1520-delta-pi.decays.pb")

strict=(-std=c++17 -Wall -Wextra -Werror -fsanitize=address,undefined -fno-sanitize-recover=all -I "$source")
# Programs that build with more warnings can include the headers too.
stricter=(-Wpedantic -Wconversion -Wsign-conversion -Wshadow)

classes() {
  protoc -I "$proto" --cpp_out="$work/gen" --python_out="$work/python" couplet/v1/exact.proto couplet/v1/decays.proto
}

example_with_protobuf() {
  # shellcheck disable=SC2046
  g++ -std=c++17 -Wall -Wextra -Werror -I "$source" -DCOUPLET_WITH_PROTOBUF -isystem "$work/gen" "$source/example_cascades.cpp" \
    "$work/gen/couplet/v1/exact.pb.cc" "$work/gen/couplet/v1/decays.pb.cc" -o "$work/example-with" \
    $(pkg-config --cflags --libs protobuf)
}

examples_agree() {
  "$work/example" "${files[1]}" >"$work/plain.txt" && "$work/example-with" "${files[1]}" >"$work/with.txt" &&
    grep -q '^K2\*(1430)+: 1000 cascades' "$work/plain.txt" && cmp "$work/plain.txt" "$work/with.txt"
}

exit_codes() {
  head -c 1000 "${files[0]}" >"$work/cut.pb"
  local program status
  for program in "$work/example" "/usr/bin/python3 $root/src/clients/python/couplet_cascades.py"; do
    $program "$work/cut.pb" >/dev/null 2>&1; status=$?
    [ $status = 3 ] || { echo "a damaged file: exit code $status"; return 1; }
    $program "$0" >/dev/null 2>&1; status=$?
    [ $status = 2 ] || { echo "a foreign file: exit code $status"; return 1; }
  done
}

check "tools" tools
check "tables" tables
check "classes of the schema" classes
check "example" g++ "${strict[@]}" "${stricter[@]}" "$source/example_cascades.cpp" -o "$work/example"
check "example with protobuf" example_with_protobuf
check "cascades for the comparison of languages" g++ "${strict[@]}" "${stricter[@]}" -O2 "$here/dump_cascades.cpp" -o "$work/dump"
check "tests in C++" g++ "${strict[@]}" -O2 -I "$here/../cpp" "$here/cascades_test.cpp" -o "$work/cascades_test"
[ "$failed" -eq 0 ] || finish
export PYTHONPATH="$work/python:$root/src/clients/python:$here/.."
check "both variants of the example print the same" examples_agree
check "exit codes of the example and of the Python script" exit_codes
check "C++: tests run without an error of the sanitizers" counted "$work/cascades_test" "${files[@]}"
check "Python" counted /usr/bin/python3 "$here/test_python_cascades.py" "${files[@]}"
check "the three languages agree" counted /usr/bin/python3 "$here/test_cascade_agreement.py" "$work/dump" "$dist" "${files[@]}"
finish

#!/usr/bin/env bash
# Builds the C++ and Python clients of the sidecar with Debian's gRPC and runs their tests, and their examples, against a
# real server. Usage: run.sh WORK_DIR. Needs `npm run build`. Last line: N passed, N failed.
set -uo pipefail
here=$(cd "$(dirname "$0")" && pwd)
. "$here/../../support/checks.sh"
root=$(cd "$here/../../.." && pwd)
mkdir -p "$1/cpp" "$1/python"
work=$(cd "$1" && pwd)
server=

stop_server() { [ -z "$server" ] || { kill "$server" && wait "$server"; } 2>/dev/null; }
trap stop_server EXIT

tools() {
  local tool
  for tool in g++ protoc pkg-config grpc_cpp_plugin grpc_python_plugin /usr/bin/python3 node; do
    command -v "$tool" >/dev/null || { echo "missing tool: $tool (Debian: g++ pkg-config protobuf-compiler-grpc python3)"; return 1; }
  done
  pkg-config --exists grpc++ || { echo "missing library: libgrpc++-dev"; return 1; }
  /usr/bin/python3 -c 'import grpc, google.protobuf' || { echo "missing: python3-grpcio python3-protobuf"; return 1; }
}

protos() { (cd "$root/proto" && ls couplet/v1/{exact,decays,factors,couplings,sidecar}.proto); }

python_classes() {
  # shellcheck disable=SC2046
  protoc -I "$root/proto" --python_out="$work/python" --grpc_out="$work/python" \
    --plugin=protoc-gen-grpc="$(command -v grpc_python_plugin)" $(protos)
}

cpp_classes() {
  # shellcheck disable=SC2046
  protoc -I "$root/proto" --cpp_out="$work/cpp" --grpc_out="$work/cpp" \
    --plugin=protoc-gen-grpc="$(command -v grpc_cpp_plugin)" $(protos) || return 1
  local file
  for file in "$work"/cpp/couplet/v1/{exact,decays,factors,couplings,sidecar}.pb.cc "$work/cpp/couplet/v1/sidecar.grpc.pb.cc"; do
    g++ -std=c++17 -O1 -I "$work/cpp" -c "$file" -o "$work/cpp/$(basename "$file" .cc).o" || return 1
  done
}

cpp_program() {
  # shellcheck disable=SC2046
  g++ -std=c++17 -O1 -Wall -Wextra -Werror -Wconversion -Wshadow -isystem "$work/cpp" -I "$root/src/clients/cpp" "$1" "$work"/cpp/*.o \
    -o "$2" $(pkg-config --cflags --libs grpc++ protobuf)
}

start_server() {
  node "$root/dist/cli/main.js" serve --listen "unix:$work/sidecar.sock" --metrics none 2>"$work/server.log" &
  server=$!
  local k
  for k in $(seq 300); do
    digest=$(grep -oE 'DecayTables","sha256":"[0-9a-f]{64}' "$work/server.log" | grep -oE '[0-9a-f]{64}$') && return 0
    kill -0 "$server" 2>/dev/null || break
    sleep 0.1
  done
  cat "$work/server.log"
  return 1
}

python() { PYTHONPATH="$work/python:$root/src/clients/python:$here:$here/.." /usr/bin/python3 "$@"; }

address="unix:$work/sidecar.sock"

examples_agree() {
  "$work/sidecar_example" "$address" 'Sigma(1385)+' "$digest" 1000 7 1400 >"$work/cpp.txt" &&
    python "$root/src/clients/python/couplet_sidecar.py" "$address" --parent 'Sigma(1385)+' --sha256 "$digest" --draws 1000 --seed 7 --mass 1400 >"$work/python.txt" &&
    grep -q -- '->' "$work/cpp.txt" && cmp "$work/cpp.txt" "$work/python.txt"
}

exit_codes() {
  local status
  "$work/sidecar_example" "$address" 'Sigma(1385)+' "$(printf '%064d' 0)" 2>/dev/null; status=$?
  [ $status = 3 ] || { echo "C++, another table: exit code $status"; return 1; }
  python "$root/src/clients/python/couplet_sidecar.py" "$address" --parent nobody 2>/dev/null; status=$?
  [ $status = 2 ] || { echo "Python, unknown parent: exit code $status"; return 1; }
}

# The server is gone in the middle of a stream: both clients say UNAVAILABLE and end.
server_killed() {
  local status
  kill -9 "$server" && wait "$server" 2>/dev/null
  server=
  timeout 30 "$work/sidecar_example" "$address" 'Sigma(1385)+' >/dev/null 2>&1; status=$?
  [ $status = 2 ] || { echo "C++: exit code $status"; return 1; }
  timeout 30 env PYTHONPATH="$work/python" /usr/bin/python3 "$root/src/clients/python/couplet_sidecar.py" "$address" --parent x >/dev/null 2>&1; status=$?
  [ $status = 2 ] || { echo "Python: exit code $status"; return 1; }
}

check "tools" tools
[ "$failed" -eq 0 ] || finish
check "Python classes of the schema" python_classes
check "C++ classes of the schema" cpp_classes
check "C++ example" cpp_program "$root/src/clients/cpp/sidecar_example.cpp" "$work/sidecar_example"
check "C++ tests" cpp_program "$here/sidecar_test.cpp" "$work/sidecar_test"
check "a server with the built-in tables" start_server
[ "$failed" -eq 0 ] || finish
check "Python client" counted python "$here/test_sidecar.py" "$address" "$digest"
check "C++ client" counted "$work/sidecar_test" "$address" "$digest"
check "the examples in C++ and Python print the same" examples_agree
check "exit codes of the examples" exit_codes
check "clients of a server that was killed end by themselves" server_killed
check "a new server takes over the socket that the killed one left" start_server
finish

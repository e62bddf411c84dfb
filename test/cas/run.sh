#!/usr/bin/env bash
# Confirms decompositions and dimensions of SU(3) with GAP (Debian: gap-core), and SU(2) coefficients with SymPy (Debian:
# python3-sympy). Needs `npm run build`. Prints `ok  name` lines and, last, `N passed, N failed`; fails without a tool.
set -uo pipefail
cd "$(dirname "$0")/../.."
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
passed=0
failed=0

# Shows the lines of a checking program and adds up its last one; a program that does not get there counts as failed.
count() {
  local name=$1 output status
  shift
  output=$("$@" 2>&1)
  status=$?
  local last
  last=$(tail -n 1 <<<"$output")
  if [[ $last =~ ^([0-9]+)\ passed,\ ([0-9]+)\ failed$ ]] && { [ "$status" -eq 0 ] || [ "${BASH_REMATCH[2]}" -gt 0 ]; }; then
    passed=$((passed + BASH_REMATCH[1]))
    failed=$((failed + BASH_REMATCH[2]))
    head -n -1 <<<"$output"
  else
    failed=$((failed + 1))
    echo "FAILED  $name (exit code $status)"
    tail -n 5 <<<"$output"
  fi
}

if ! node test/cas/dump.cjs "$work"; then
  echo "FAILED  numbers to check (run npm run build)"
  echo "0 passed, 1 failed"
  exit 1
fi
if command -v gap >/dev/null; then
  count "GAP" gap -q -A "$work/su3.g" test/cas/su3.g </dev/null
else
  failed=$((failed + 1))
  echo "FAILED  missing tool: gap (Debian package gap-core)"
fi
# Debian's Python has Debian's SymPy; another python3 may come first on the path.
if /usr/bin/python3 -c "import sympy" 2>/dev/null; then
  count "SymPy" /usr/bin/python3 test/cas/su2.py "$work/su2.jsonl"
else
  failed=$((failed + 1))
  echo "FAILED  missing tool: SymPy (Debian package python3-sympy)"
fi
echo "$passed passed, $failed failed"
[ "$failed" -eq 0 ]

# For the scripts of checks that end in one line `N passed, N failed`; they source this file.
passed=0
failed=0

# One check: a name and the command that must succeed.
check() {
  local name=$1
  shift
  if "$@"; then
    passed=$((passed + 1))
    echo "ok  $name"
  else
    failed=$((failed + 1))
    echo "FAILED  $name"
  fi
}

# A program that prints `ok  ...` and `FAILED  ...` lines: they count one by one, the check itself stands for the exit code.
counted() {
  local log status
  log=$("$@")
  status=$?
  grep -vE '^[0-9]+ passed, [0-9]+ failed$' <<<"$log"
  passed=$((passed + $(grep -c '^ok  ' <<<"$log")))
  failed=$((failed + $(grep -c '^FAILED  ' <<<"$log")))
  return "$status"
}

finish() {
  echo "$passed passed, $failed failed"
  [ "$failed" -eq 0 ] && [ "$passed" -gt 0 ]
  exit
}

# Sourced by tools/quickstart and tests/run-all, with $log set: steps that are quiet unless they fail.

fail() {
  echo "halostep: $1: $2" >&2
  exit 1
}

# start_log: an empty log; says where it is when a person is watching.
start_log() {
  { mkdir -p "$(dirname -- "$log")" && : >"$log"; } 2>/dev/null || fail 'writing the log' "cannot write $log"
  [ ! -t 2 ] || echo "halostep: $1 (log: $log)" >&2
}

# reason: what the log says about the failure, in one line.
reason() {
  line=$(grep 'tests failed out of' "$log") ||
    line=$(grep -E -m 1 '^halostep: |^E: |error:|undefined reference|^CMake Error' "$log") ||
    line=$(grep -v -e '^ninja: ' -e '^ *$' "$log" | tail -n 1)
  case $line in
    'CMake Error'*:) line="$line $(grep -F -m 1 -A 2 -- "$line" "$log" | sed '1d;s/^ *//' | grep -m 1 .)" ;;
  esac
  echo "${line#halostep: "$1": }"
}

# step WHAT command...: runs it into the log; on failure shows the end of the log and says what failed in one line.
step() {
  what=$1
  shift
  "$@" >>"$log" 2>&1 && return
  tail -n 25 "$log" >&2
  fail "$what" "$(reason "$what") (log: $log)"
}

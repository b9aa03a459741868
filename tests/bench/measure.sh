#!/bin/sh
# sh tests/bench/measure.sh BUILD_DIRECTORY [REPETITIONS]
# Runs the benchmarks and prints Markdown for docs/performance.md. CPU time of one thread; medians of the repetitions.
# The build: cmake -S . -B BUILD_DIRECTORY -DCMAKE_BUILD_TYPE=Release -DHALOSTEP_BUILD_BENCH=ON
set -eu
export LC_ALL=C
build=${1:?usage: measure.sh BUILD_DIRECTORY [REPETITIONS]}
repetitions=${2:-9}
here=$(dirname "$0")
load=$(cut -d' ' -f1 /proc/loadavg)
results=$(mktemp)
trap 'rm -f "$results" "$results.log"' EXIT

type=$(sed -n 's/^CMAKE_BUILD_TYPE:[A-Z]*=//p' "$build/CMakeCache.txt")
[ "$type" = Release ] || echo "measure.sh: build type is '$type', not Release" >&2
compiler=$(sed -n 's/^CMAKE_CXX_COMPILER:[A-Z]*=//p' "$build/CMakeCache.txt")

# Two processes: what a long chain leaves behind in memory must not reach the other cases.
bench() {
  "$build/halostep-bench" --benchmark_filter="$1" --benchmark_repetitions="$repetitions" \
    --benchmark_enable_random_interleaving=true --benchmark_report_aggregates_only=true --benchmark_format=csv \
    2>"$results.log" >>"$results" || {
    cat "$results.log" >&2
    exit 1
  }
}
bench '^(nci|open)'
bench '^c4000'
command_cost=$(/usr/bin/python3 "$here/command_cost.py" "$build/halostep")

model=$(sed -n 's/^model name[^:]*: //p' /proc/cpuinfo | head -n 1)
echo "- machine: $model, $(nproc) cores, load average before the run $load"
echo "- compiler: $("$compiler" --version | head -n 1), build type $type"
echo "- table: $("$build/halostep" table | sed -n 's/^content hash *\(.\{16\}\).*/content hash \1/p')"
echo

# Columns of Google Benchmark: name, iterations, real_time, cpu_time, time_unit, bytes/s, items/s, ...
awk -F, -v command_cost="$command_cost" '
  /_(median|fastest)"?,/ {
    gsub(/"/, "", $1)
    scale = $5 == "ns" ? 1e-6 : $5 == "us" ? 1e-3 : 1
    if (sub(/_fastest$/, "", $1)) {
      least[$1] = $4 * scale
      next
    }
    sub(/_median$/, "", $1)
    ms[$1] = $4 * scale
    rate[$1] = $7
  }
  function target(what, figure, unit, limit) {
    verdict = figure <= limit ? "met" : "not met"
    printf "| %s | %.*f%s | %s%s | %s |\n", what, figure < 10 ? 2 : 1, figure, unit, limit, unit, verdict
  }
  END {
    split(command_cost, command, " ")
    base = "nci/babel_parse_symmetry"
    print "| target | figure | limit | |"
    print "|---|---|---|---|"
    target("NCI, parse and study over Open Babel parse and symmetry", ms["nci/parse_study"] / ms[base], "", 1.5)
    target("the same, fastest repetitions", least["nci/parse_study"] / least[base], "", 1.5)
    target("C4000 alkane, study after parsing", ms["c4000/study"], " ms", 50)
    target("peak memory of one outcome query", command[3], " MB", 80)
    target("cold start, one substrate, wall time, median of 21", command[1], " ms", 60)
    target("the same, CPU time", command[2], " ms", 60)
    print ""
    print "| case | ms | fastest ms | µs per structure | structures per s | over the yardstick |"
    print "|---|---|---|---|---|---|"
    n = split("nci/babel_parse nci/babel_parse_symmetry nci/babel_parse_symmetry_log nci/parse nci/bonds nci/study " \
              "nci/parse_study nci/symmetry nci/canonical c4000/then_nci_parse c4000/parse c4000/study " \
              "c4000/symmetry c4000/canonical open_engine", order, " ")
    for (i = 1; i <= n; ++i) {
      name = order[i]
      if (!(name in ms))
        printf "| %s | not run | | | | |\n", name
      else if (name ~ /nci/)
        printf "| %s | %.3g | %.3g | %.3g | %.4g | %.2f |\n", name, ms[name], least[name], 1e6 / rate[name], rate[name],
               ms[name] / ms[base]
      else
        printf "| %s | %.3g | %.3g | | | |\n", name, ms[name], least[name]
    }
  }' "$results"

"""Cold start and peak memory of the command: command_cost.py HALOSTEP

Prints "wall_ms cpu_ms peak_mb": medians of 21 warm runs of one substrate, and the largest resident set of one outcome
query. The set of this script, about 10 MB, is the least that can be seen.
"""
import os
import statistics
import sys
import time

RUNS = 21


def run(*args):
    """(wall seconds, CPU seconds, resident set in MB)"""
    quiet = [(os.POSIX_SPAWN_OPEN, 1, os.devnull, os.O_WRONLY, 0)]
    start = time.perf_counter()
    pid = os.posix_spawn(args[0], args, os.environ, file_actions=quiet)
    _, status, usage = os.wait4(pid, 0)
    if status:
        sys.exit(f"{' '.join(args)}: status {status}")
    return time.perf_counter() - start, usage.ru_utime + usage.ru_stime, usage.ru_maxrss / 1024


def main(command):
    run(command, "bonds", "CC(C)C")
    runs = [run(command, "bonds", "CC(C)C") for _ in range(RUNS)]
    wall, cpu = (1000 * statistics.median(r[i] for r in runs) for i in (0, 1))
    peak = max(run(command, "outcome", "CC(C)C", "--format", "json")[2] for _ in range(3))
    print(f"{wall:.1f} {cpu:.1f} {peak:.1f}")


if __name__ == "__main__":
    if len(sys.argv) != 2:
        sys.exit(__doc__)
    main(sys.argv[1])

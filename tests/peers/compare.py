"""Paired rounds of our bench and the peers on one mesh, and our bench over sizes; writes the figures into docs/performance.md.

Every run is a process of its own, timed inside from mesh arrays in memory to displacements in memory. Within a round the order is ours,
peer, ours, peer ..: each peer is compared with the mean of ours just before and just after it, so that other work on the machine hits both.
"""
import argparse
import datetime
import importlib.metadata
import json
import math
import os
import pathlib
import platform
import statistics
import subprocess
import sys
import tempfile

HERE = pathlib.Path(__file__).resolve().parent
PAGE = HERE.parent.parent / "docs" / "performance.md"
SIZES = (2_000, 50_000, 400_000, 1_000_000)
PEERS = {
    "superlu": "scikit-fem + SuperLU, as `spsolve` comes",
    "superlu-mmd": "scikit-fem + SuperLU, symmetric mode and minimum degree",
    "cholmod": "scikit-fem + CHOLMOD, minimum degree",
    "cholmod-metis": "scikit-fem + CHOLMOD, METIS",
}


def last_json(command):
    done = subprocess.run(command, capture_output=True, text=True, check=True)
    return json.loads(done.stdout.strip().splitlines()[-1])


def machine():
    text = pathlib.Path("/proc/cpuinfo").read_text() if os.path.exists("/proc/cpuinfo") else ""
    names = [line.split(":")[1].strip() for line in text.splitlines() if line.startswith("model name")]
    return f"{names[0] if names else platform.processor()}, {os.cpu_count()} cores, {platform.system()}"


def median(values):
    return statistics.median(values)


def has_cholmod():
    try:
        import sksparse.cholmod  # noqa: F401
    except ImportError:
        print("CHOLMOD is not there: its rows are left out", file=sys.stderr)
        return False
    return True


def measure(arguments, folder):
    mesh, solution = folder / "mesh.txt", folder / "solution.txt"
    size = str(arguments.unknowns)
    subprocess.run([arguments.bench, "--write", mesh, size], check=True)
    once = [arguments.bench, "--once", solution, size]
    methods = [m for m in PEERS if m.startswith("superlu") or has_cholmod()]
    runs = {method: [] for method in methods}
    ours = [last_json(once)]
    for i_round in range(arguments.rounds):
        for method in methods:
            if method == "superlu" and i_round >= arguments.slow_rounds:
                continue
            peer = last_json([sys.executable, HERE / "peer.py", mesh, method, solution])
            ours.append(last_json(once))
            for key in ("seconds", "processor_seconds", "solve_seconds"):
                peer[key + "_ratio"] = peer[key] / (0.5 * (ours[-2][key] + ours[-1][key]))
            runs[method].append(peer)
            print(f"round {i_round + 1} {method}: {peer['seconds']:.2f} s, ours {ours[-1]['seconds']:.2f} s, "
                  f"difference {peer['difference']:.1e}", flush=True)
    return ours, runs


def report(ours, runs):
    versions = ", ".join(f"{name} {importlib.metadata.version(name)}" for name in ("numpy", "scipy", "scikit-fem"))
    lines = [
        f"{ours[0]['unknowns']:,} unknowns. {when_and_where()}; {versions}.",
        "",
        "| | median s | ratio of medians | paired ratio, median | processor time, paired ratio | factor and solve only, paired ratio | peak kB an unknown | largest difference | runs |",
        "|---|---|---|---|---|---|---|---|---|",
    ]
    base = median([run["seconds"] for run in ours])

    def peak(group):
        return f"{median([run['peak_bytes'] / run['unknowns'] for run in group]) / 1e3:.2f}"

    lines.append(f"| this program | {base:.2f} | 1 | 1 | 1 | 1 | {peak(ours)} | | {len(ours)} |")
    for method, group in runs.items():
        if not group:
            continue
        of = lambda key: median([run[key] for run in group])  # noqa: E731
        lines.append(
            f"| {PEERS[method]} | {of('seconds'):.1f} | {of('seconds') / base:.1f} | {of('seconds_ratio'):.1f} | {of('processor_seconds_ratio'):.1f} | "
            f"{of('solve_seconds_ratio'):.1f} | {peak(group)} | {of('difference'):.0e} | {len(group)} |"
        )
    return "\n".join(lines)


def when_and_where():
    load = f"{os.getloadavg()[0]:.1f}"
    return f"Measured {datetime.date.today().isoformat()} on {machine()}; processes wanting to run at the end: {load}"


def sizes_report(bench, folder):
    """One row a size: medians of three runs in fresh memory, growth from the row above."""
    lines = ["| unknowns | s | processor s | grows as n to the | peak kB an unknown |", "|---|---|---|---|---|"]
    before = None
    for size in SIZES:
        runs = [last_json([bench, "--once", folder / "solution.txt", str(size)]) for _ in range(3)]
        n = runs[0]["unknowns"]
        seconds, processor, peak = (median([run[key] for run in runs]) for key in ("seconds", "processor_seconds", "peak_bytes"))
        growth = f"{math.log(processor / before[1]) / math.log(n / before[0]):.2f}" if before and before[0] > 10_000 else ""
        lines.append(f"| {n:,} | {seconds:.3f} | {processor:.3f} | {growth} | {peak / n / 1e3:.2f} |")
        before = (n, processor)
    return "\n".join([f"{when_and_where()}. Growth is that of processor time.", "", *lines])


def write(section, table):
    """Replaces the text between the marks of a section of the page."""
    print(table)
    begin, end = f"<!-- {section}: written by tests/peers/compare.py -->", f"<!-- {section}: end -->"
    before, rest = PAGE.read_text().split(begin)
    PAGE.write_text(f"{before}{begin}\n{table}\n{end}{rest.split(end)[1]}")


def main():
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--bench", required=True, help="the built bench `solver`")
    parser.add_argument("--unknowns", type=int, default=400_000)
    parser.add_argument("--rounds", type=int, default=5, help="0 leaves the peers out")
    parser.add_argument("--slow-rounds", type=int, default=2, help="rounds of the peer that takes longest")
    arguments = parser.parse_args()
    with tempfile.TemporaryDirectory() as name:
        folder = pathlib.Path(name)
        write("sizes", sizes_report(arguments.bench, folder))
        if arguments.rounds > 0:
            write("solver", report(*measure(arguments, folder)))


main()

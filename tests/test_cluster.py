"""A cluster's executor gives the bytes of the serial study: a local one of two processes, in an interpreter of its own."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import scenarios_made as made

STEEPER = """
[[layout]]
name = "steep"
anchor = [{ name = "A", bearing = "0 deg", radius = "5 m" }]
"""
PROGRAM = """
import sys
from distributed import Client, LocalCluster
from guys.exchange import comparison
from guys.scenario import read_scenario
from guys.studies.compare import compare

if __name__ == "__main__":
    scenario = read_scenario(sys.argv[1])
    with LocalCluster(n_workers=2, threads_per_worker=1, dashboard_address=None) as cluster, Client(cluster) as client:
        spread = comparison.as_text(compare([scenario], executor=client.get_executor()))
    print(len(spread), spread == comparison.as_text(compare([scenario])))
"""


def test_a_local_cluster_gives_the_same_bytes(tmp_path: Path) -> None:
    scenario = tmp_path / "mast.toml"
    scenario.write_text(made.text(made.ring_mast(3)) + STEEPER, encoding="utf-8")
    (tmp_path / "spread.py").write_text(PROGRAM, encoding="utf-8")
    done = subprocess.run([sys.executable, str(tmp_path / "spread.py"), str(scenario)], capture_output=True, text=True, check=True)
    size, same = done.stdout.split()
    assert same == "True"
    assert int(size) > 1000

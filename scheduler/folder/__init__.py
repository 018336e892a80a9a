"""Read and make farm folders; every finding with its place."""

from scheduler.folder.folder import FarmFolder, read_farm_folder
from scheduler.folder.scenarios import scenario_folder, scenario_names

__all__ = ["FarmFolder", "read_farm_folder", "scenario_folder", "scenario_names"]

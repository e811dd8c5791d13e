"""From a project's folder to a Project: reads TOML and CSV, validates everything, reports all faults in one pass."""

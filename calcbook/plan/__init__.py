"""From a Project to the sheets to be made: their numbers, templates and parameters."""

"""Run: assembles workbooks from templates and executes them."""

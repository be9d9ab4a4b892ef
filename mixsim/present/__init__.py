"""Answers made visible: tables for a terminal, plots, files."""

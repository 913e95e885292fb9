"""Findings and results written for people and machines."""

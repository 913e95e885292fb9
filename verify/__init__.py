"""Checks a chemical structure against its reported NMR peak lists."""

"""Functional groups, activity coefficients and phase equilibrium, without any web framework."""

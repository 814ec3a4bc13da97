"""Equation forms: how printed coefficients become numbers."""

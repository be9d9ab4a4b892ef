"""Permittivity and permeability of dielectric mixtures from one recipe."""

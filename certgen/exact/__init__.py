"""Exact algebra on FLINT: fast arithmetic for the searching side and the reader."""

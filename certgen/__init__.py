"""Certificates for claims of algebraicity: prove, store, check, typeset."""

__version__ = "0.1.0"

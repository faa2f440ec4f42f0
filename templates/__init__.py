"""The wording of the appendices: one template per proof object, shared pieces.

Templates hold wording and layout only.  Every number and formula comes from a
context builder of `certgen.appendix`; text is escaped unless it is LaTeX of ours.
"""

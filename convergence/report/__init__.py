"""From findings to documents: text, figures and pages; nothing here computes a verdict.

Files build on each other in one direction: furniture (`_x.py`), then html, records and
terminal, then figures_*, then sections_*, then document.
"""

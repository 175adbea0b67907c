"""From a result to the papers: one view, and one module for each paper."""

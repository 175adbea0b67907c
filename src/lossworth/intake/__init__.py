"""The only place that reads users' files: tender file, bidders' workbooks and tables."""

"""The only place that reads users' files: tender file and bids in, records and findings out."""

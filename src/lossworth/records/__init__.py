"""What everybody speaks: frozen records of the tender and of the bids, each value with the place it came from."""

"""The owner's report: what comes back, why, and whether it is chance; for reading on paper, with its figures attached."""

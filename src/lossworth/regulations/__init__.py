"""Published limits as dated data with source, and their look-ups: EU and US loss and efficiency tables, reference
temperatures, test tolerances, plausible losses.

Nothing here compares bids or writes findings. A look-up answers with a limit that names its table, row, source, dates
and cautions; what a table does not cover is a LookupError, and a wrong question a ValueError.
"""

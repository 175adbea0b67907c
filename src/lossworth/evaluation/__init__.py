"""From checked records to a ranking: rates of a lot, pricing, responsiveness, owning cost, ranking."""

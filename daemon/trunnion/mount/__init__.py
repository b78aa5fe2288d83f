"""Mount: what the antenna is, two hinges and their travel."""

"""The control socket: how `trunnion status`, `stop` and the others reach the running daemon."""

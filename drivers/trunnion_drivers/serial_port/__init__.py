"""Serial ports: local, over the network, and their modem-control lines."""

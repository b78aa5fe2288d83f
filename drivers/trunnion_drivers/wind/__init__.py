"""Wind inputs: small drivers that say how hard it blows."""

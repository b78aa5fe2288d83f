"""The link: hands orders to the driver and brings readings back, whatever the hardware does."""

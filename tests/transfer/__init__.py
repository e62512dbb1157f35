"""The transfer packet."""

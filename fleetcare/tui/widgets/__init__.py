"""What screens are put together from: a long list, a sheet of text, plots."""

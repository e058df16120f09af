"""The screens themselves, one file each."""

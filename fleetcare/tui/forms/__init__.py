"""Forms: what is asked, read into which draft, and stored by which operation."""

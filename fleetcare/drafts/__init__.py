"""Text from outside becomes typed values, or a list of field errors: form, CSV and command line alike."""

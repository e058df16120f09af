"""The screens: they show what operations give, and hold no rule and no arithmetic of the trade."""

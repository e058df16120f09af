"""What each engine needs next: triggers, replay, combining, covering, deferral, states."""

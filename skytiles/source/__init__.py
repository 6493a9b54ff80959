"""What the light could do: brightness against time since the event, and its spread."""

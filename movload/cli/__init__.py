"""How is it asked? One file a command; each parses, calls and delivers, and none does arithmetic."""

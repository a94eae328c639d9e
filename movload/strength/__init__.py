"""What can each part carry? One module for each published set of resistance rules; every strength shows its steps."""

"""What is proved about a driven response: its equations as typed, its joins, its inputs."""

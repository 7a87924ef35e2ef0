"""What stands between a browser and the dashboard's kernels: the server, its rules and its page."""

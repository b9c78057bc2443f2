"""Stage: solve. The engine: practices, and the quantities that compute themselves under one."""

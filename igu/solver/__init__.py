"""The heat balance of N stacks at once: residual, Jacobian, Newton, outcome."""

"""What a standard calls U, g, q_i, N_i: conventions over one or two solves."""

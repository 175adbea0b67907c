"""The engine: present-value rates A, B and C from prices, loads and discount rates; arrays in, arrays out."""

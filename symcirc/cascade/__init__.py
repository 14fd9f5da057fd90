"""A target shared out among the stages of a cascade: pole pairs, zeros and gain, each stage matched by itself."""

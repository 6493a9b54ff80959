"""The science of searching a region of the sky: numpy in, numpy out."""

"""Models as they are stated: equations and inputs, and the state form that follows from them."""

"""Pictures of a plan: sky and joints as they will be. SVG, readable in black and white."""

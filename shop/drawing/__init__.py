"""Pictures from numbers, as SVG text: the side view and small charts. No models, no styles inside."""

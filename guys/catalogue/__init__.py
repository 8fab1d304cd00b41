"""What the trade sells by standard, each with its source: ropes, the parts in a cable's load path, tubes.

Names are systematic and nobody's brand: kind, construction, grade where there are several, size last, such as ``steel-7x7-6mm``,
``strand-1x7-ehs-1/4in``, ``turnbuckle-1/2in``.  Every entry says how its values came here (`Known`): read in the document named or in a
public transcription of it, worked out from such, or from memory.  What is from memory is listed with that mark and told when used.
"""

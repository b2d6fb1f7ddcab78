package parser

func (f *File) judge() {}

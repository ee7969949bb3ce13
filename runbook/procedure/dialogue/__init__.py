"""Questions whose answers become a file: what is asked, what an answer may be, and the text that it makes."""

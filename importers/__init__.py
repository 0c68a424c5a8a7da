"""Files in, drafts and problems out; nothing here touches a database."""

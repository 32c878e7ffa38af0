// A small folder of tables without fault, every figure invented, for tests that break it.
#pragma once

#include <stdexcept>
#include <string>
#include <vector>

#include "isotally/tables.hpp"
#include "tables/columns.hpp"

namespace isotally {

inline std::vector<TableFile> sample_files() {
    return {
        {"README.md", "# Sample\n"},
        {"bans.csv",
         "id,reactions,smarts,unless,reason,instead,source,locator,status,confidence,note\n"
         "b1,nitration chlorination-x,[NH2],,\"goes off, \"\"with a bang\"\"\nand smoke\",protect "
         "it,,,practice,high,\n"
         "b2,*,[Na],,burns,,hansch,p. 3,memory,low,\n"},
        {"cautions.csv", "code,reactions,substrate_smarts,product_smarts,severity,text,source,locator,status,"
                         "confidence,note\n"
                         "acid,nitration,,,90,Hot acid,,,practice,,\n"},
        {"constants.csv", "id,substituent,quantity,value,sd,use,source,locator,status,confidence,note\n"
                          "c1,NO2,sigma_m,0.71,0.02,yes,hansch,table 1,seen,high,\n"
                          "c2,NO2,sigma_m,0.69,0.05,no,handbook,,memory,medium,rounded\n"
                          "c3,Me,sigma_p_plus,-.31,0.02,yes,hansch,table 1,seen,high,\n"},
        {"datapackage.json", datapackage_text("7")},
        {"factors.csv",
         "id,reaction,temperature_C,acid_percent,substrate,relation,value,sd_log10,use,use_reason,"
         "source,locator,status,confidence,note\n"
         "f1,nitration-x,25,,Cc1ccccc1,para,60,0.05,yes,,hansch,,memory,high,\n"},
        {"measurements.json", R"([
 {"id": "m1", "reaction": "nitration-x", "temperature_C": -30, "acid_percent": null,
  "substrate": "Cc1ccccc1",
  "products": [
   {"smiles": "Cc1ccccc1[N+](=O)[O-]", "percent": 55.6,
    "sd": 1.5},
   {"smiles": "Cc1cccc([N+](=O)[O-])c1", "percent": 2.7},
   {"smiles": "Cc1ccc([N+](=O)[O-])cc1", "percent": 41.7}],
  "complete": true, "use": "yes", "control": "kinetic", "source": "handbook", "status": "memory"},
 {"id": "m2", "reaction": "chlorination-x",
  "substrate": "c1ccccc1",
  "products": [{"smiles": "X", "percent": 95}
  ],
  "complete": false, "use": "bound", "use_reason": "lower limit",
  "source": null, "status": "practice"}
]
)"},
        {"model.csv", "family,quantity,value,sd,source,locator,status,confidence,note\n"
                      "nitration,rho,-6.2,1,hansch,,memory,medium,\n"
                      "all,rho,-8,3,,,practice,,\n"},
        {"names.csv", "name,smiles,preferred,source,locator,status,confidence,note\n"
                      "toluene,Cc1ccccc1,yes,,,practice,high,\n"},
        {"rates.csv", "id,reaction,temperature_C,acid_percent,substrate,value,sd_log10,use,use_reason,source,"
                      "locator,status,confidence,note\n"
                      "r1,nitration-x,25,80,Cc1ccccc1,24.5,0.05,yes,,hansch,,memory,high,\n"},
        {"reaction_figures.csv", "id,reaction,quantity,value,sd,source,locator,status,confidence,note\n"
                                 "rf1,nitration-x,temperature_default_C,30,,,,practice,high,\n"},
        {"reactions.csv", "id,family,name,conditions,new_group,has_acid,instead,note\n"
                          "nitration-x,nitration,nitration,nitric acid,*[N+](=O)[O-],yes,chlorinate,\n"
                          "chlorination-x,chlorination,chlorination,chlorine,*Cl,no,,slow\n"},
        {"sources.json", R"([
 {"id": "hansch", "type": "article-journal", "author": [{"family": "Hansch", "given": "C."},
   {"family": "Leo", "given": "A."}, {"family": "Taft", "given": "R. W."}],
  "issued": {"date-parts": [[1991]]}, "container-title": "Chem. Rev.", "volume": 91, "page": "165",
  "DOI": "10.1021/cr00002a004", "custom": {"x": [1]}},
 {"id": "handbook", "type": "book", "title": "A Handbook"}
]
)"},
        {"states.csv",
         "reactions,group,state,acid_from,acid_to,both_forms,source,locator,status,confidence,note\n"
         "nitration-x,kind:acceptor,NO2,70,90,no,,,practice,low,\n"},
        {"substituents.csv", "id,name,smiles,smarts,rank,like,kind,prefix,principal,note\n"
                             "NO2,nitro,*[N+](=O)[O-],,,,acceptor,nitro,,\n"
                             "Me,methyl,*C,,,,alkyl,methyl,,\n"
                             "ester,other ester,,[#0]C(=O)O[#6],40,NO2,acceptor,,ester,\n"},
    };
}

inline std::string& text_of(std::vector<TableFile>& files, const std::string& name) {
    for (TableFile& file : files)
        if (file.name == name)
            return file.text;
    throw std::logic_error("no file " + name);
}

/// Replaces the first place where `from` stands.
inline void change(std::vector<TableFile>& files, const std::string& name, const std::string& from,
                   const std::string& to) {
    std::string& text = text_of(files, name);
    const std::size_t at = text.find(from);
    if (at == std::string::npos)
        throw std::logic_error("nothing to change in " + name + ": " + from);
    text.replace(at, from.size(), to);
}

}  // namespace isotally
